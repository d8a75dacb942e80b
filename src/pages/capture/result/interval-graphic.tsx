import type { Density } from '../../../../shared/estimate.ts';
import { fixed } from '../../../lib/format.ts';

const WIDTH = 440;
const INSET = 20;
const STEPS = [0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10];

/** The two intervals around a density on one axis: thick for the statistics alone, thin with ends for ± U. */
export function IntervalGraphic({ density }: { density: Density }) {
  const { dbmPerHz, lowDbmPerHz, highDbmPerHz, expandedUncertaintyDb: expanded } = density;
  const reach = 1.3 * Math.max(expanded, dbmPerHz - lowDbmPerHz, highDbmPerHz - dbmPerHz, 0.01);
  const place = (db: number) => INSET + ((db - (dbmPerHz - reach)) / (2 * reach)) * (WIDTH - 2 * INSET);
  const step = STEPS.find((candidate) => (2 * reach) / candidate <= 4.5) ?? 20;
  const first = Math.ceil((dbmPerHz - reach) / step);
  const count = Math.floor((dbmPerHz + reach) / step) - first + 1;
  const ticks = Array.from({ length: count }, (_, i) => (first + i) * step);
  const decimals = Math.max(0, Math.ceil(-Math.log10(step) - 1e-9));
  return (
    <svg
      role="img"
      aria-label={`95 % statistics ${fixed(lowDbmPerHz, 2)} to ${fixed(highDbmPerHz, 2)}, expanded ± ${fixed(expanded, 2)} dB`}
      viewBox={`0 0 ${WIDTH} 40`}
      className="my-2 block h-10 w-full font-mono text-tick"
      preserveAspectRatio="xMidYMid meet"
    >
      <path
        d={`M${place(dbmPerHz - expanded)} 4v10m0 -5H${place(dbmPerHz + expanded)}m0 -5v10`}
        fill="none"
        className="stroke-est"
        strokeWidth="1.4"
      />
      <path d={`M${place(lowDbmPerHz)} 9H${place(highDbmPerHz)}`} className="stroke-est" strokeWidth="6" />
      <path d={`M${place(dbmPerHz)} 3v12`} className="stroke-ink" strokeWidth="1.4" />
      <path d={`M${INSET} 20.5H${WIDTH - INSET}`} className="stroke-ink3" />
      {ticks.map((db) => (
        <g key={db}>
          <path d={`M${place(db)} 20v4`} className="stroke-ink3" />
          <text x={place(db)} y="36" textAnchor="middle" className="fill-ink3">
            {fixed(db, decimals)}
          </text>
        </g>
      ))}
    </svg>
  );
}
