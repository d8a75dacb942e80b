import { useTable } from '@tanstack/react-table';
import clsx from 'clsx';
import { useMemo, useRef, type ReactNode } from 'react';
import { useLate } from '../../lib/use-late.ts';
import { usePhone } from '../../lib/use-media.ts';
import { CaptureRow, Tick } from './capture-row.tsx';
import { columnsFor, features, GROUP_HEIGHT, padding, RIGHT, ROW_HEIGHT, widthOf } from './columns.tsx';
import { useRowWindow } from './use-row-window.ts';
import type { Group, Item, TableRow } from './rows.ts';
import { WhiskerAxis, type Axis } from '../../components/plot/whisker.tsx';

const getRowId = ({ capture }: TableRow) => capture.id;

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
  /** What stands in place of rows where there are none. */
  placeholder?: ReactNode;
  /** Blank bars under the heads, once loading takes more than 200 ms. */
  loading: boolean;
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
  loading,
}: Props) {
  const phone = usePhone();
  const columns = columnsFor(phone, grouped);
  const data = useMemo(() => items.flatMap((item) => (item.kind === 'row' ? [item.row] : [])), [items]);
  const table = useTable({ features, columns, data, getRowId });
  const rows = table.getRowModel().rows;
  const body = useRef<HTMLTableSectionElement>(null);
  const window_ = useRowWindow(items, body, currentId);
  const ids = useMemo(() => columns.map(({ id }) => id ?? ''), [columns]);
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
          <col style={{ width: widthOf('select', phone, grouped) }} />
          {ids.map((id) => (
            <col key={id} style={{ width: widthOf(id, phone, grouped) }} />
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
          {loading && <LoadingCells ids={ids} />}
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
                  ids={ids}
                  phone={phone}
                  rowNumber={window_.virtual ? window_.first + offset + 2 : undefined}
                  selected={selected.has(item.row.capture.id)}
                  current={currentId === item.row.capture.id}
                  onSelect={onSelect}
                  onCurrent={onCurrent}
                />
              ),
            )}
          {window_.after > 0 && <tr style={{ height: window_.after }} aria-hidden="true" />}
        </tbody>
      </table>
    </div>
  );
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

function LoadingCells({ ids }: { ids: string[] }) {
  const late = useLate(true);
  if (!late) return null;
  return Array.from({ length: 6 }, (_, row) => (
    <tr key={row} className="border-b border-rule2" style={{ height: ROW_HEIGHT }}>
      <td>{row === 0 && <span className="sr-only">Loading the captures</span>}</td>
      {ids.map((id, column) => (
        <td key={id} className={padding(id)}>
          <span
            className={clsx('block h-2 bg-rule2', RIGHT.has(id) && 'ml-auto')}
            style={{ width: `${50 + ((row * 17 + column * 29) % 36)}%` }}
          />
        </td>
      ))}
    </tr>
  ));
}
