import { createColumnHelper, tableFeatures } from '@tanstack/react-table';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { CaptureSummary } from '../../../shared/capture.ts';
import { Chip } from '../../components/ui/chip.tsx';
import { Mark, markOfVerdict } from '../../components/ui/mark.tsx';
import { bandwidth, fixed, frequency, NBSP } from '../../lib/format.ts';
import { firstName, fullTime, shortTime } from '../../lib/time.ts';
import { densityOf, type TableRow } from './rows.ts';
import { Sparkline } from './sparkline.tsx';
import { rowState } from './state-words.ts';
import { Whisker } from '../../components/plot/whisker.tsx';

export const features = tableFeatures({});
const helper = createColumnHelper<typeof features, TableRow>();

export const ROW_HEIGHT = 45;
export const GROUP_HEIGHT = 46;

/** Widths in px; `capture` takes what is left. */
const WIDTHS: Record<string, number | undefined> = {
  select: 28,
  trace: 119,
  campaign: 116,
  centre: 78,
  rbw: 62,
  averaging: 177,
  density: 72,
  uncertainty: 62,
  whisker: 140,
  spurs: 38,
  state: 125,
  by: 101,
};

/** Ungrouped, the campaign's column takes its room from these. */
const LIST_WIDTHS: Record<string, number | undefined> = {
  ...WIDTHS,
  campaign: 110,
  averaging: 152,
  uncertainty: 58,
  state: 121,
  by: 96,
};
const PHONE_WIDTHS: Record<string, number | undefined> = {
  select: 36,
  capture: 150,
  density: 84,
  uncertainty: 66,
  averaging: 184,
};

export function widthOf(id: string, phone: boolean, grouped: boolean): number | undefined {
  const widths = grouped ? WIDTHS : LIST_WIDTHS;
  return phone ? (PHONE_WIDTHS[id] ?? widths[id]) : widths[id];
}

export const RIGHT = new Set(['centre', 'rbw', 'density', 'uncertainty', 'spurs']);
/** Room at the left of a column's cells. */
export function padding(id: string): string {
  if (id === 'averaging' || id === 'state') return 'pl-6';
  if (id === 'by' || id === 'campaign') return 'pl-2';
  return '';
}

/** Cells that a row without a result gives to its sentence. */
export const RESULT_COLUMNS = ['averaging', 'density', 'uncertainty', 'whisker'];

const two = (first: ReactNode, second: ReactNode) => (
  <>
    <div className="truncate leading-[17px]">{first}</div>
    <div className="truncate text-[11px] leading-4 text-ink3">{second}</div>
  </>
);

function centre({ centreHz, spanHz }: CaptureSummary) {
  if (centreHz === null) return null;
  const middle = frequency(centreHz, 2);
  const span = spanHz === null ? null : frequency(spanHz, spanHz >= 1e6 ? 1 : 0);
  return (
    <div className="font-mono">
      {two(`${middle.number} ${middle.unit}`, span === null ? '' : `${span.number} ${span.unit}`)}
    </div>
  );
}

function averaging({ estimate, state }: CaptureSummary) {
  if (estimate === null)
    return <Mark kind="none">{state === 'needsSettings' ? 'waits for settings' : 'no estimate yet'}</Mark>;
  return <Mark kind={markOfVerdict[estimate.verdict]}>{estimate.verdictSummary}</Mark>;
}

function rbw({ rbwHz }: CaptureSummary) {
  if (rbwHz === null) return <span className="text-caption text-ink3">not stated</span>;
  const width = bandwidth(rbwHz);
  return <span className="font-mono whitespace-nowrap">{`${width.number} ${width.unit}`}</span>;
}

const COLUMNS = {
  trace: helper.display({
    id: 'trace',
    header: 'Trace',
    cell: ({ row }) => <Sparkline capture={row.original.capture} />,
  }),
  capture: helper.display({
    id: 'capture',
    header: 'Capture',
    cell: ({ row: { original } }) => (
      <>
        <Link
          id={`capture-${original.capture.id}`}
          to={`/captures/${original.capture.id}`}
          title={`${original.capture.name}, ${original.capture.number}`}
          className="block truncate text-body leading-[18px] text-ink after:absolute after:inset-0 hover:text-est-h focus-visible:outline-none"
        >
          {original.capture.name}
        </Link>
        <div className="truncate font-mono text-[11px] leading-4 text-ink3" title={original.capture.fileName}>
          {original.capture.fileName}
        </div>
      </>
    ),
  }),
  campaign: helper.display({
    id: 'campaign',
    header: 'Campaign',
    cell: ({ row }) => (
      <span className="line-clamp-2 text-caption text-ink2">
        {row.original.capture.campaign?.name ?? 'none'}
      </span>
    ),
  }),
  centre: helper.display({
    id: 'centre',
    header: 'Centre, span',
    cell: ({ row }) => centre(row.original.capture),
  }),
  rbw: helper.display({ id: 'rbw', header: 'RBW', cell: ({ row }) => rbw(row.original.capture) }),
  averaging: helper.display({
    id: 'averaging',
    header: 'Averaging check',
    cell: ({ row }) => averaging(row.original.capture),
  }),
  density: helper.display({
    id: 'density',
    header: 'dBm/Hz',
    cell: ({ row }) => {
      const density = densityOf(row.original.capture);
      if (density === null) return <span className="text-caption text-ink3">none yet</span>;
      return <span className="font-mono text-body font-medium">{fixed(density.dbmPerHz, 2)}</span>;
    },
  }),
  uncertainty: helper.display({
    id: 'uncertainty',
    header: `U, 95${NBSP}%`,
    cell: ({ row }) => {
      const density = densityOf(row.original.capture);
      return density === null ? null : (
        <span className="font-mono">
          ±{NBSP}
          {fixed(density.expandedUncertaintyDb, 2)}
        </span>
      );
    },
  }),
  whisker: helper.display({
    id: 'whisker',
    header: '',
    cell: ({ row: { original } }) => (
      <Whisker axis={original.axis} value={densityOf(original.capture)} height={ROW_HEIGHT - 1} />
    ),
  }),
  spurs: helper.display({
    id: 'spurs',
    header: 'Spurs',
    cell: ({ row }) => <span className="font-mono">{row.original.capture.estimate?.spurs ?? ''}</span>,
  }),
  state: helper.display({
    id: 'state',
    header: 'State',
    cell: ({ row }) => {
      const { word, tone } = rowState(row.original.capture);
      return <Chip tone={tone}>{word}</Chip>;
    },
  }),
  by: helper.display({
    id: 'by',
    header: 'By',
    cell: ({ row: { original } }) => (
      <span
        className="truncate text-caption text-ink2"
        title={`${original.capture.uploadedBy.name}, ${fullTime(original.capture.uploadedAt)}`}
      >
        {firstName(original.capture.uploadedBy.name)}, {shortTime(original.capture.uploadedAt)}
      </span>
    ),
  }),
};

const WIDE = [
  'trace',
  'capture',
  'centre',
  'rbw',
  'averaging',
  'density',
  'uncertainty',
  'whisker',
  'spurs',
  'state',
  'by',
] as const;
const PHONE = [
  'capture',
  'density',
  'uncertainty',
  'averaging',
  'whisker',
  'spurs',
  'state',
  'centre',
  'rbw',
  'trace',
  'by',
] as const;

const withCampaign = (names: readonly (keyof typeof COLUMNS)[]) =>
  names.flatMap((name) => (name === 'capture' ? ([name, 'campaign'] as const) : [name]));
const take = (names: readonly (keyof typeof COLUMNS)[]) => helper.columns(names.map((name) => COLUMNS[name]));

const SETS = {
  wide: take(WIDE),
  wideList: take(withCampaign(WIDE)),
  phone: take(PHONE),
  phoneList: take(withCampaign(PHONE)),
};

/** Columns for the width at hand; on phones the capture comes first and stays. Ungrouped, the campaign is a column. */
export function columnsFor(phone: boolean, grouped: boolean) {
  if (phone) return grouped ? SETS.phone : SETS.phoneList;
  return grouped ? SETS.wide : SETS.wideList;
}
