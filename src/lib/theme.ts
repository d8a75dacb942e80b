import { useSyncExternalStore } from 'react';

export type Theme = 'system' | 'light' | 'dark';
const KEY = 'perhertz.theme';
const listeners = new Set<() => void>();

/** The theme that the person chose on this computer. */
export function storedTheme(): Theme {
  try {
    const stored = localStorage.getItem(KEY);
    return stored === 'light' || stored === 'dark' ? stored : 'system';
  } catch {
    return 'system';
  }
}

/** Marks the document so that the style sheet takes the chosen colours. */
export function applyTheme(theme: Theme): void {
  if (theme === 'system') document.documentElement.removeAttribute('data-theme');
  else document.documentElement.dataset.theme = theme;
}

export function chooseTheme(theme: Theme): void {
  try {
    if (theme === 'system') localStorage.removeItem(KEY);
    else localStorage.setItem(KEY, theme);
  } catch {
    // Without storage the choice holds for this page alone.
  }
  applyTheme(theme);
  for (const listener of listeners) listener();
}

function subscribe(listener: () => void): () => void {
  const scheme = matchMedia('(prefers-color-scheme: dark)');
  listeners.add(listener);
  scheme.addEventListener('change', listener);
  return () => {
    listeners.delete(listener);
    scheme.removeEventListener('change', listener);
  };
}

/** The choice: system, light or dark. */
export const useTheme = (): Theme => useSyncExternalStore(subscribe, storedTheme);

const shownNow = (): 'light' | 'dark' => {
  const chosen = document.documentElement.dataset.theme;
  if (chosen === 'light' || chosen === 'dark') return chosen;
  return matchMedia('(prefers-color-scheme: dark)').matches ? 'dark' : 'light';
};

/** What is shown: light or dark. For canvases that must be redrawn when it changes. */
export const useShownTheme = (): 'light' | 'dark' => useSyncExternalStore(subscribe, shownNow);

/** The present value of a colour token of the style sheet, such as `est` or `trace-x`. */
export function token(name: string): string {
  return getComputedStyle(document.documentElement).getPropertyValue(`--${name}`).trim();
}
