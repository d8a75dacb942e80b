import { useEffect, useSyncExternalStore } from 'react';

export interface KeyRow {
  /** Keys as shown: `j`, `k`. */
  keys: readonly string[];
  words: string;
}

interface SheetState {
  open: boolean;
  screen: { title: string; rows: readonly KeyRow[] } | null;
}

let state: SheetState = { open: false, screen: null };
const listeners = new Set<() => void>();

function set(next: Partial<SheetState>): void {
  state = { ...state, ...next };
  for (const listener of listeners) listener();
}

export const openKeySheet = (): void => set({ open: true });
export const closeKeySheet = (): void => set({ open: false });

export const useKeySheetState = (): SheetState =>
  useSyncExternalStore(
    (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    () => state,
  );

/** Lists a screen's keys on the sheet that `?` opens, while the screen is mounted. `rows` must be constant. */
export function useKeyList(title: string, rows: readonly KeyRow[]): void {
  useEffect(() => {
    set({ screen: { title, rows } });
    return () => set({ screen: null });
  }, [title, rows]);
}
