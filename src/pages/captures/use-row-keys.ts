import { useCallback, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { KeyRow } from '../../components/layout/key-sheet-state.ts';
import { useKeys } from '../../lib/keys.ts';
import type { Item } from './rows.ts';

export const CAPTURES_KEYS: readonly KeyRow[] = [
  { keys: ['/'], words: 'search' },
  { keys: ['n'], words: 'choose files' },
  { keys: ['j', 'k'], words: 'next, previous row' },
  { keys: ['Enter'], words: 'open the row' },
  { keys: ['x'], words: 'select the row' },
];

/** Selection, and moving through the rows by keys. */
export function useRowKeys(items: readonly Item[], actions: { search: () => void; choose: () => void }) {
  const [selected, setSelected] = useState<ReadonlySet<string>>(new Set());
  const [currentId, setCurrentId] = useState<string | null>(null);
  const navigate = useNavigate();

  const select = useCallback((ids: readonly string[], on: boolean) => {
    setSelected((before) => {
      const next = new Set(before);
      for (const id of ids) {
        if (on) next.add(id);
        else next.delete(id);
      }
      return next;
    });
  }, []);
  const clear = useCallback(() => setSelected(new Set()), []);

  const step = (by: 1 | -1) => {
    const ids = items.flatMap((item) => (item.kind === 'row' ? [item.row.capture.id] : []));
    if (ids.length === 0) return;
    const at = currentId === null ? -1 : ids.indexOf(currentId);
    const next = at < 0 ? (by === 1 ? 0 : ids.length - 1) : Math.min(ids.length - 1, Math.max(0, at + by));
    setCurrentId(ids[next]);
  };

  useKeys({
    j: () => step(1),
    k: () => step(-1),
    x: () => {
      if (currentId !== null) select([currentId], !selected.has(currentId));
    },
    '/': actions.search,
    n: actions.choose,
    Escape: () => {
      if (selected.size === 0) return false;
      clear();
    },
    Enter: (event) => {
      if (currentId === null || !(event.target === document.body || event.target instanceof HTMLInputElement))
        return false;
      void navigate(`/captures/${currentId}`);
    },
  });
  return { selected, select, clear, currentId, setCurrentId };
}
