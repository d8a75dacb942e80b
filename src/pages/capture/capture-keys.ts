import type { KeyRow } from '../../components/layout/key-sheet-state.ts';
import { jumpToSection } from '../../components/ui/section.tsx';
import { useKeys } from '../../lib/keys.ts';
import type { DraftControls } from './contract.ts';

export const CAPTURE_KEYS: readonly KeyRow[] = [
  { keys: ['1', '–', '7'], words: 'go to a section' },
  { keys: ['u'], words: 'undo' },
  { keys: ['Shift u'], words: 'redo' },
  { keys: ['b'], words: 'mark a span on the trace' },
  { keys: ['e'], words: 'leave the marked span out' },
  { keys: ['[', ']'], words: 'previous, next spur' },
  { keys: ['+', '−', '0'], words: 'zoom in, out, whole span' },
  { keys: ['t'], words: 'trace as table' },
  { keys: ['Esc'], words: 'drop the marked span; back to the latest estimate' },
];

const SECTIONS = [1, 2, 3, 4, 5, 6, 7];

/** The page's own keys; those of the trace are with the trace. */
export function useCaptureKeys(draft: DraftControls, readOnly: boolean, leave: (() => void) | null): void {
  const jumps = Object.fromEntries(SECTIONS.map((number) => [String(number), () => jumpToSection(number)]));
  useKeys({
    ...jumps,
    u: () => {
      if (!readOnly) draft.undo();
    },
    U: () => {
      if (!readOnly) draft.redo();
    },
    Escape: () => {
      if (leave === null) return false;
      leave();
    },
  });
}
