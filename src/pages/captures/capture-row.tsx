import { FlexRender, type Row } from '@tanstack/react-table';
import clsx from 'clsx';
import { memo, type ReactNode } from 'react';
import { Progress } from '../../components/ui/progress.tsx';
import { countWords } from '../../lib/format.ts';
import { type features, padding, RESULT_COLUMNS, RIGHT, ROW_HEIGHT } from './columns.tsx';
import type { TableRow } from './rows.ts';

interface CaptureRowProps {
  row: Row<typeof features, TableRow>;
  ids: string[];
  phone: boolean;
  rowNumber: number | undefined;
  selected: boolean;
  current: boolean;
  onSelect: (ids: readonly string[], selected: boolean) => void;
  onCurrent: (id: string) => void;
}

/** One capture; the whole row opens it. */
export const CaptureRow = memo(function CaptureRow({
  row,
  ids,
  phone,
  rowNumber,
  selected,
  current,
  onSelect,
  onCurrent,
}: CaptureRowProps) {
  const { capture } = row.original;
  const sentence = rowSentence(row.original);
  const stuck = phone ? 'sticky z-10 bg-paper' : '';
  return (
    <tr
      aria-rowindex={rowNumber}
      aria-current={current || undefined}
      onFocus={() => onCurrent(capture.id)}
      style={{ height: ROW_HEIGHT }}
      className={clsx(
        'relative border-b border-rule2 transition-colors duration-[120ms] hover:bg-hover has-[a:focus-visible]:outline-2 has-[a:focus-visible]:-outline-offset-2 has-[a:focus-visible]:outline-est',
        selected && 'bg-selected',
      )}
    >
      <td className={clsx('relative z-[1]', stuck, 'left-0')}>
        <Tick
          label={`Select ${capture.name}`}
          checked={selected}
          onChange={(checked) => onSelect([capture.id], checked)}
        />
      </td>
      {row.getAllCells().map((cell) => {
        const { id } = cell.column;
        if (sentence !== null && RESULT_COLUMNS.includes(id)) {
          if (id !== ids.find((name) => RESULT_COLUMNS.includes(name))) return null;
          return (
            <td
              key={cell.id}
              colSpan={ids.filter((name) => RESULT_COLUMNS.includes(name)).length}
              className="pr-4 pl-6"
            >
              {sentence}
            </td>
          );
        }
        return (
          <td
            key={cell.id}
            className={clsx(
              RIGHT.has(id) && 'text-right',
              padding(id),
              id === 'capture' && clsx('pr-2', stuck, phone && 'left-9 border-r border-r-rule'),
            )}
          >
            <FlexRender cell={cell} />
          </td>
        );
      })}
    </tr>
  );
});

/** What a row without a result says instead: how far the reading is, or why it stopped. */
function rowSentence({ capture: { state, progress, problem } }: TableRow): ReactNode {
  if (state === 'unreadable') {
    return (
      <span className="line-clamp-2 text-bad">
        {problem === null ? 'The file can’t be read.' : problem.message}
      </span>
    );
  }
  if (state === 'received') return <span className="text-ink3">waits to be read</span>;
  if (state !== 'reading') return null;
  const words =
    progress === null || progress.points === 0
      ? 'reading'
      : `reading ${countWords(progress.points)}${progress.ofPoints === null ? '' : ` of ${countWords(progress.ofPoints)}`}`;
  return (
    <div className="grid max-w-[260px] gap-1">
      <span className="font-mono text-caption text-ink3">{words}</span>
      <Progress label={words} share={progress?.ofPoints ? progress.points / progress.ofPoints : null} />
    </div>
  );
}

/** A checkbox with a target of 24 px, 36 on phones. */
export function Tick({
  label,
  checked,
  partly = false,
  onChange,
}: {
  label: string;
  checked: boolean;
  partly?: boolean;
  onChange: (checked: boolean) => void;
}) {
  return (
    <label className="grid size-6 cursor-pointer place-items-center justify-items-start max-phone:size-9 max-phone:place-items-center">
      <span className="sr-only">{label}</span>
      <input
        type="checkbox"
        className="check"
        checked={checked}
        ref={(input) => {
          if (input !== null) input.indeterminate = partly;
        }}
        onChange={(event) => onChange(event.target.checked)}
      />
    </label>
  );
}
