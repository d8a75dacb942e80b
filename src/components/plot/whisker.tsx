import { fixed } from '../../lib/format.ts';

export const WHISKER_WIDTH = 116;
const INSET = 2;

export interface Axis {
  lowDb: number;
  highDb: number;
  ticksDb: number[];
  /** A campaign's limit, drawn dashed. */
  limitDb: number | null;
}

const STEPS = [0.5, 1, 2, 5, 10, 20, 50];
/** A narrower axis would make a small uncertainty look large. */
const LEAST_SPAN_DB = 4;

/** One axis for all densities of a group, wide enough for every interval and the limit; null where there is none. */
export function axisOf(
  values: readonly { dbmPerHz: number; expandedUncertaintyDb: number }[],
  limitDb: number | null,
): Axis | null {
  if (values.length === 0) return null;
  const lows = values.map(({ dbmPerHz, expandedUncertaintyDb }) => dbmPerHz - expandedUncertaintyDb);
  const highs = values.map(({ dbmPerHz, expandedUncertaintyDb }) => dbmPerHz + expandedUncertaintyDb);
  const low = Math.min(...lows, limitDb ?? Infinity);
  const high = Math.max(...highs, limitDb ?? -Infinity);
  const spanDb = Math.max(LEAST_SPAN_DB, (high - low) * 1.1);
  const lowDb = (low + high - spanDb) / 2;
  const highDb = (low + high + spanDb) / 2;
  const step = STEPS.find((candidate) => spanDb / candidate <= 4) ?? Math.ceil(spanDb / 4);
  const first = Math.ceil(lowDb / step);
  const last = Math.floor(highDb / step);
  const ticksDb = Array.from({ length: last - first + 1 }, (_, i) => Number(((first + i) * step).toFixed(6)));
  return { lowDb, highDb, ticksDb, limitDb };
}

const place = ({ lowDb, highDb }: Axis, db: number) =>
  INSET + ((db - lowDb) / (highDb - lowDb)) * (WHISKER_WIDTH - 2 * INSET);

/** The axis with its numbers, for a group's row or the table's head. */
export function WhiskerAxis({ axis }: { axis: Axis }) {
  const { ticksDb } = axis;
  const decimals = ticksDb.every(Number.isInteger) ? 0 : 1;
  const every = ticksDb.length > 3 ? 2 : 1;
  return (
    <svg
      role="img"
      aria-label={`Axis from ${fixed(axis.lowDb, decimals)} to ${fixed(axis.highDb, decimals)} dBm/Hz`}
      width={WHISKER_WIDTH + 24}
      height="24"
      viewBox={`-12 0 ${WHISKER_WIDTH + 24} 24`}
      className="block font-mono text-tick"
    >
      {ticksDb.map((db, i) => (
        <g key={db}>
          <path d={`M${place(axis, db)} 23.5v-5`} className="stroke-ink3" />
          {i % every === 0 && (
            <text x={place(axis, db)} y="13" textAnchor="middle" className="fill-ink3 font-normal">
              {fixed(db, decimals)}
            </text>
          )}
        </g>
      ))}
      <path d={`M${place(axis, axis.lowDb)} 23.5H${place(axis, axis.highDb)}`} className="stroke-ink3" />
    </svg>
  );
}

interface WhiskerProps {
  axis: Axis | null;
  value: { dbmPerHz: number; expandedUncertaintyDb: number } | null;
  height: number;
}

/** A density with ± U on its group's axis. The numbers stand in the cells beside it. */
export function Whisker({ axis, value, height }: WhiskerProps) {
  if (axis === null) return null;
  const middle = height / 2;
  const low = value === null ? 0 : place(axis, value.dbmPerHz - value.expandedUncertaintyDb);
  const high = value === null ? 0 : place(axis, value.dbmPerHz + value.expandedUncertaintyDb);
  return (
    <svg
      aria-hidden="true"
      width={WHISKER_WIDTH + 24}
      height={height}
      viewBox={`-12 0 ${WHISKER_WIDTH + 24} ${height}`}
      className="block"
    >
      {axis.limitDb !== null && (
        <path d={`M${place(axis, axis.limitDb)} 0V${height}`} className="stroke-ink" strokeDasharray="2 2" />
      )}
      {value !== null && (
        <g className="fill-est stroke-est">
          <path
            d={`M${low} ${middle - 3.5}v7M${high} ${middle - 3.5}v7M${low} ${middle}H${high}`}
            strokeWidth="1.3"
          />
          <circle cx={place(axis, value.dbmPerHz)} cy={middle} r="2.6" stroke="none" />
        </g>
      )}
    </svg>
  );
}
