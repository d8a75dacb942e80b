import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import type { Campaign, CaptureSummary } from '../../../shared/capture.ts';
import { changeCapture, captureKeys } from '../../api/captures.ts';
import { campaignKeys } from '../../api/campaigns.ts';
import { Button, LinkButton } from '../../components/ui/button.tsx';
import { Menu } from '../../components/ui/menu.tsx';
import { Message } from '../../components/ui/message.tsx';
import { plural } from '../../lib/format.ts';
import { exportList } from './export-list.ts';

interface Move {
  id: string;
  to: string | null;
}

export interface Moved {
  words: string;
  /** Moves that take it back. */
  back: Move[];
}

/** Moves captures one after the other; what has been moved before one fails stays moved. */
export function useMoves(onDone: (moved: Moved | null) => void) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: async ({ moves }: { moves: Move[]; moved: Moved | null }) => {
      for (const { id, to } of moves) await changeCapture(id, { campaignId: to });
    },
    onSuccess: (_, { moved }) => onDone(moved),
    onSettled: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: captureKeys.all }),
        client.invalidateQueries({ queryKey: campaignKeys.all }),
      ]),
  });
}

interface Props {
  selected: readonly CaptureSummary[];
  campaigns: readonly Campaign[];
  onClear: () => void;
  /** Asks for a new campaign and goes on with it. */
  onNew: (then: (campaign: Campaign) => void) => void;
  moves: ReturnType<typeof useMoves>;
}

/** What can be done with the selected rows; stands at the foot of the window while any is selected. */
export function SelectionBar({ selected, campaigns, onClear, onNew, moves }: Props) {
  if (selected.length === 0) return null;
  const moveTo = (to: string | null, name: string) =>
    moves.mutate({
      moves: selected.map(({ id }) => ({ id, to })),
      moved: {
        words: `${plural(selected.length, 'capture')} moved to ${name}.`,
        back: selected.map(({ id, campaign }) => ({ id, to: campaign?.id ?? null })),
      },
    });
  return (
    <div
      role="region"
      aria-label="Selected captures"
      className="sticky bottom-0 z-20 -mx-8 flex flex-wrap items-center gap-2.5 border-t border-ink bg-sheet px-8 py-2.5 max-phone:-mx-4 max-phone:px-4"
    >
      <span className="text-table font-semibold" aria-live="polite">
        {plural(selected.length, 'capture')} selected
      </span>
      <Menu
        align="start"
        side="top"
        heading="Move to"
        trigger={
          <Button disabled={moves.isPending}>{moves.isPending ? 'Moving…' : 'Move to a campaign'}</Button>
        }
        items={[
          ...campaigns.map(({ id, name }) => ({ label: name, onSelect: () => moveTo(id, `“${name}”`) })),
          { label: 'a new campaign…', onSelect: () => onNew(({ id, name }) => moveTo(id, `“${name}”`)) },
          { label: 'no campaign', onSelect: () => moveTo(null, 'no campaign') },
        ]}
      />
      <Button onClick={() => exportList(selected)}>Export these</Button>
      <Button kind="quiet" shortcut="Esc" onClick={onClear}>
        Clear
      </Button>
      {moves.isError && (
        <span role="alert" className="text-caption text-bad">
          Not all were moved: {moves.error.message}
        </span>
      )}
    </div>
  );
}

/** Says what was moved, with the way back. */
export function useMovedNote() {
  const [moved, setMoved] = useState<Moved | null>(null);
  const moves = useMoves(setMoved);
  const note = moved !== null && (
    <Message
      tone="done"
      live="polite"
      title={
        <>
          {moved.words}{' '}
          <LinkButton
            onClick={() => moves.mutate({ moves: moved.back, moved: null })}
            disabled={moves.isPending}
          >
            Take it back
          </LinkButton>
        </>
      }
    />
  );
  return { moves, note };
}
