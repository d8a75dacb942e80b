import { useEffect, useEffectEvent, useSyncExternalStore } from 'react';

const KEY = 'perhertz.keys';
const listeners = new Set<() => void>();

function enabledNow(): boolean {
  try {
    return localStorage.getItem(KEY) !== 'off';
  } catch {
    return true;
  }
}

/** Turns single-letter keys on or off on this computer. */
export function setKeysEnabled(enabled: boolean): void {
  try {
    if (enabled) localStorage.removeItem(KEY);
    else localStorage.setItem(KEY, 'off');
  } catch {
    return;
  }
  for (const listener of listeners) listener();
}

/** Whether single-letter keys act. */
export const useKeysEnabled = (): boolean =>
  useSyncExternalStore((listener) => {
    listeners.add(listener);
    return () => listeners.delete(listener);
  }, enabledNow);

/** True where a key press belongs to what has the focus: a field, an open menu, a dialog, a slider. */
function belongsElsewhere(target: EventTarget | null): boolean {
  if (!(target instanceof Element)) return false;
  return (
    target.closest(
      'input:not([type="checkbox"]), textarea, select, [contenteditable="true"], [role="dialog"], [role="menu"], [role="listbox"], [role="textbox"]',
    ) !== null
  );
}

/**
 * Single keys for a screen, by `KeyboardEvent.key`. They never fire in a field, a menu or a dialog, nor together with
 * Ctrl, Alt or Meta, and letters, digits and signs are off where the person turned them off. A handler that returns false leaves the
 * key to the browser.
 */
export function useKeys(handlers: Record<string, (event: KeyboardEvent) => void | boolean>): void {
  const onKey = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey) return;
    if (belongsElsewhere(event.target)) return;
    if (event.key.length === 1 && !enabledNow()) return;
    const handler = Object.hasOwn(handlers, event.key) ? handlers[event.key] : undefined;
    if (handler !== undefined && handler(event) !== false) event.preventDefault();
  });
  useEffect(() => {
    const listen = (event: KeyboardEvent) => onKey(event);
    window.addEventListener('keydown', listen);
    return () => window.removeEventListener('keydown', listen);
  }, []);
}
