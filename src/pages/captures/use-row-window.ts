import { useWindowVirtualizer } from '@tanstack/react-virtual';
import { useEffect, useState, type RefObject } from 'react';
import { GROUP_HEIGHT, ROW_HEIGHT } from './columns.tsx';
import type { Item } from './rows.ts';

/** Longer tables draw only the rows around the window. */
const VIRTUAL_FROM = 100;

/** Which items to draw, and the heights of what is left out before and after; follows the current row. */
export function useRowWindow(
  items: readonly Item[],
  body: RefObject<HTMLTableSectionElement | null>,
  currentId: string | null,
) {
  const virtual = items.length > VIRTUAL_FROM;
  const [margin, setMargin] = useState(0);
  useEffect(() => {
    const observer = new ResizeObserver(() => {
      if (body.current !== null)
        setMargin(Math.round(body.current.getBoundingClientRect().top + window.scrollY));
    });
    observer.observe(document.body);
    return () => observer.disconnect();
  }, [body]);
  const virtualizer = useWindowVirtualizer({
    count: virtual ? items.length : 0,
    estimateSize: (index) => (items[index].kind === 'group' ? GROUP_HEIGHT : ROW_HEIGHT),
    overscan: 14,
    scrollMargin: margin,
  });
  useEffect(() => {
    if (currentId === null) return;
    const index = items.findIndex((item) => item.kind === 'row' && item.row.capture.id === currentId);
    const link = document.getElementById(`capture-${currentId}`);
    if (link === null && virtual && index >= 0) virtualizer.scrollToIndex(index, { align: 'center' });
    const frame = requestAnimationFrame(() => {
      const found = document.getElementById(`capture-${currentId}`);
      found?.focus({ preventScroll: true });
      found?.closest('tr')?.scrollIntoView({ block: 'nearest' });
    });
    return () => cancelAnimationFrame(frame);
    // Only a move of the current row moves the focus, not every change of the list.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [currentId]);
  if (!virtual) return { virtual, first: 0, last: items.length - 1, before: 0, after: 0 };
  const shown = virtualizer.getVirtualItems();
  const first = shown.at(0);
  const last = shown.at(-1);
  if (first === undefined || last === undefined)
    return { virtual, first: 0, last: Math.min(items.length, 40) - 1, before: 0, after: 0 };
  return {
    virtual,
    first: first.index,
    last: last.index,
    before: first.start - margin,
    after: virtualizer.getTotalSize() - (last.end - margin),
  };
}
