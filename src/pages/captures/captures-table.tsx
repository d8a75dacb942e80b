import { useTable, type Row } from '@tanstack/react-table';
import { useWindowVirtualizer } from '@tanstack/react-virtual';
import clsx from 'clsx';
import { useEffect, useMemo, useRef, useState, type ReactNode } from 'react';
import { Progress } from '../../components/ui/progress.tsx';
import { countWords } from '../../lib/format.ts';
import { usePhone } from '../../lib/use-media.ts';
import { columnsFor, features, RESULT_COLUMNS, RIGHT, ROW_HEIGHT, WIDTHS } from './columns.tsx';
import type { Group, Item, TableRow } from './rows.ts';
import { WhiskerAxis, type Axis } from './whisker.tsx';

const GROUP_HEIGHT = 46;
/** Longer tables draw only the rows around the window. */
const VIRTUAL_FROM = 100;

interface Props {
  items: readonly Item[];
  grouped: boolean;
  /** The one axis of an ungrouped table. */
  axis: Axis | null;
  selected: ReadonlySet<string>;
  onSelect: (ids: readonly string[], selected: boolean) => void;
  /** Row that j and k have reached. */
  currentId: string | null;
  onCurrent: (id: string) => void;
  /** Loading bars or the like, in place of rows. */
  placeholder?: ReactNode;
}

export function CapturesTable({
  items,
  grouped,
  axis,
  selected,
  onSelect,
  currentId,
  onCurrent,
  placeholder,
}: Props) {
  const phone = usePhone();
  const columns = columnsFor(phone, grouped);
  const data = useMemo(() => items.flatMap((item) => (item.kind === 'row' ? [item.row] : [])), [items]);
  const table = useTable({ features, columns, data, getRowId: ({ capture }) => capture.id });
  const rows = table.getRowModel().rows;
  const body = useRef<HTMLTableSectionElement>(null);
  const window_ = useRowWindow(items, body, currentId);
  const ids = columns.map(({ id }) => id ?? '');
  const allSelected = rows.length > 0 && rows.every(({ id }) => selected.has(id));
  const someSelected = rows.some(({ id }) => selected.has(id));

  return (
    <div
      className="relative -mx-1 overflow-x-auto px-1 max-phone:-mx-4 max-phone:px-4"
      role="region"
      aria-label="Table of captures"
      tabIndex={phone ? 0 : undefined}
    >
      <table
        className="w-full min-w-[1140px] table-fixed border-collapse text-table"
        aria-rowcount={window_.virtual ? items.length + 1 : undefined}
      >
        <colgroup>
          <col style={{ width: phone ? 36 : WIDTHS.select }} />
          {ids.map((id) => (
            <col key={id} style={{ width: phone && id === 'capture' ? 150 : WIDTHS[id] }} />
          ))}
        </colgroup>
        <thead>
          <tr className="h-8 border-b border-line text-caption text-ink2">
            <th scope="col" className={clsx('text-left font-normal', phone && 'sticky left-0 z-10 bg-paper')}>
              <Tick
                label="Select every row shown"
                checked={allSelected}
                partly={someSelected && !allSelected}
                onChange={(checked) =>
                  onSelect(
                    rows.map(({ id }) => id),
                    checked,
                  )
                }
              />
            </th>
            {table.getHeaderGroups().map((group) =>
              group.headers.map((header) => (
                <th
                  key={header.id}
                  scope="col"
                  className={clsx(
                    'font-normal whitespace-nowrap',
                    RIGHT.has(header.column.id) ? 'text-right' : 'text-left',
                    padding(header.column.id),
                    phone && header.column.id === 'capture' && 'sticky left-9 z-10 bg-paper',
                  )}
                >
                  {header.column.id === 'whisker' ? (
                    <>
                      <span className="sr-only">Density with U</span>
                      {!grouped && axis !== null && <WhiskerAxis axis={axis} />}
                    </>
                  ) : (
                    <table.FlexRender header={header} />
                  )}
                </th>
              )),
            )}
          </tr>
        </thead>
        <tbody ref={body}>
          {placeholder !== undefined && (
            <tr>
              <td colSpan={ids.length + 1}>{placeholder}</td>
            </tr>
          )}
          {window_.before > 0 && <tr style={{ height: window_.before }} aria-hidden="true" />}
          {items
            .slice(window_.first, window_.last + 1)
            .map((item, offset) =>
              item.kind === 'group' ? (
                <GroupRow
                  key={`group-${item.group.id}`}
                  group={item.group}
                  ids={ids}
                  rowNumber={window_.first + offset + 2}
                  virtual={window_.virtual}
                />
              ) : (
                <CaptureRow
                  key={item.row.capture.id}
                  row={rows[item.rowIndex]}
                  flex={(cell) => <table.FlexRender cell={cell} />}
                  ids={ids}
                  phone={phone}
                  rowNumber={window_.virtual ? window_.first + offset + 2 : undefined}
                  selected={selected.has(item.row.capture.id)}
                  current={currentId === item.row.capture.id}
                  onSelect={(checked) => onSelect([item.row.capture.id], checked)}
                  onFocus={() => onCurrent(item.row.capture.id)}
                />
              ),
            )}
          {window_.after > 0 && <tr style={{ height: window_.after }} aria-hidden="true" />}
        </tbody>
      </table>
    </div>
  );
}

/** Which items to draw, and the heights of what is left out before and after; follows the current row. */
function useRowWindow(
  items: readonly Item[],
  body: React.RefObject<HTMLTableSectionElement | null>,
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

function padding(id: string): string {
  if (id === 'averaging' || id === 'state') return 'pl-6';
  if (id === 'by' || id === 'campaign') return 'pl-2';
  return '';
}

function GroupRow({
  group,
  ids,
  rowNumber,
  virtual,
}: {
  group: Group;
  ids: string[];
  rowNumber: number;
  virtual: boolean;
}) {
  const before = ids.indexOf('whisker') + 1;
  return (
    <tr
      className="border-b border-line align-bottom"
      style={{ height: GROUP_HEIGHT }}
      aria-rowindex={virtual ? rowNumber : undefined}
    >
      <th scope="colgroup" colSpan={before} className="pb-1.5 text-left font-normal">
        <span className="sticky left-0 inline-block max-w-[calc(100vw-32px)] truncate align-bottom">
          <span className="font-semibold">{group.name}</span>
          <span className="ml-2.5 text-caption text-ink2">{group.words}</span>
        </span>
      </th>
      <td>{group.axis !== null && <WhiskerAxis axis={group.axis} />}</td>
      <td colSpan={ids.length - before} />
    </tr>
  );
}

type TheRow = Row<typeof features, TableRow>;
type Cell = ReturnType<TheRow['getAllCells']>[number];

interface CaptureRowProps {
  row: TheRow;
  flex: (cell: Cell) => ReactNode;
  ids: string[];
  phone: boolean;
  rowNumber: number | undefined;
  selected: boolean;
  current: boolean;
  onSelect: (checked: boolean) => void;
  onFocus: () => void;
}

function CaptureRow({
  row,
  flex,
  ids,
  phone,
  rowNumber,
  selected,
  current,
  onSelect,
  onFocus,
}: CaptureRowProps) {
  const { capture } = row.original;
  const sentence = rowSentence(row.original);
  const stuck = phone ? 'sticky z-10 bg-paper' : '';
  return (
    <tr
      aria-rowindex={rowNumber}
      aria-current={current || undefined}
      onFocus={onFocus}
      style={{ height: ROW_HEIGHT }}
      className={clsx(
        'relative border-b border-rule2 transition-colors duration-[120ms] hover:bg-hover has-[a:focus-visible]:outline-2 has-[a:focus-visible]:-outline-offset-2 has-[a:focus-visible]:outline-est',
        selected && 'bg-selected',
      )}
    >
      <td className={clsx('relative z-[1]', stuck, 'left-0')}>
        <Tick label={`Select ${capture.name}`} checked={selected} onChange={onSelect} />
      </td>
      {row.getAllCells().map((cell) => {
        const { id } = cell.column;
        if (sentence !== null && RESULT_COLUMNS.includes(id)) {
          if (id !== RESULT_COLUMNS[0]) return null;
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
            {flex(cell)}
          </td>
        );
      })}
    </tr>
  );
}

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
    progress === null
      ? 'reading'
      : `reading ${countWords(progress.points)}${progress.ofPoints === null ? '' : ` of ${countWords(progress.ofPoints)}`}`;
  return (
    <div className="grid max-w-[260px] gap-1">
      <span className="font-mono text-caption text-ink3">{words}</span>
      <Progress label={words} share={progress?.ofPoints ? progress.points / progress.ofPoints : null} />
    </div>
  );
}

function Tick({
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
