import type { AveragingCheck } from '../../../../shared/estimate.ts';
import { fixed } from '../../../lib/format.ts';

const WIDTH = 440;
const HEIGHT = 216;
const FLOOR = 176;
const TOP = 34;

const DASHES: Record<string, string> = {
  log: '7 3',
  power: '1.5 3',
  voltage: '5 2 1.5 2',
  none: '2 4',
  otherCount: '9 3',
};

/** Histogram of the residuals with the curves that the hypotheses predict. */
export function AveragingPlot({ check }: { check: AveragingCheck }) {
  const { histogram, curves, fits, likelihoods } = check;
  if (histogram === null || histogram.counts.length === 0) return null;
  const { edgesDb, counts } = histogram;
  const reach = Math.max(Math.abs(edgesDb[0]), Math.abs(edgesDb[edgesDb.length - 1]));
  const shown = curves.filter(({ id }) => id === fits || id === 'power' || id === 'log');
  const binDb = edgesDb[1] - edgesDb[0];
  const highest = Math.max(
    ...counts,
    ...shown.flatMap(({ density }) => density.map((value) => value * binDb)),
  );
  const x = (db: number) => WIDTH / 2 + (db / reach) * (WIDTH / 2 - 4);
  const y = (share: number) => FLOOR - (share / highest) * (FLOOR - TOP);
  const step = [0.1, 0.2, 0.5, 1, 2, 5, 10].find((candidate) => reach / candidate <= 3.2) ?? 20;
  const ticks = Array.from(
    { length: 2 * Math.floor(reach / step) + 1 },
    (_, i) => (i - Math.floor(reach / step)) * step,
  );
  const words = likelihoods
    .map(({ label, predictedScatterDb }) => `${label} predicts ${fixed(predictedScatterDb, 2)} dB`)
    .join('; ');
  return (
    <svg
      role="img"
      aria-label={`Histogram of the residuals. ${words}.`}
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      className="block w-full text-tick"
    >
      {counts.map((share, bin) => (
        <g key={bin}>
          <rect
            x={x(edgesDb[bin]) + 0.3}
            width={Math.max(0.5, x(edgesDb[bin + 1]) - x(edgesDb[bin]) - 0.6)}
            y={y(share)}
            height={FLOOR - y(share)}
            className="fill-hist"
          />
          {share > 0 && (
            <rect
              x={x(edgesDb[bin]) + 0.3}
              width={Math.max(0.5, x(edgesDb[bin + 1]) - x(edgesDb[bin]) - 0.6)}
              y={y(share)}
              height="1.2"
              className="fill-hist-cap"
            />
          )}
        </g>
      ))}
      {shown.map(({ id, atDb, density }) => (
        <path
          key={id}
          d={atDb
            .flatMap((db, i) =>
              Math.abs(db) > reach ? [] : [`${x(db).toFixed(1)} ${y(density[i] * binDb).toFixed(1)}`],
            )
            .map((point, i) => `${i === 0 ? 'M' : 'L'}${point}`)
            .join('')}
          fill="none"
          className={id === fits ? 'stroke-est' : 'stroke-ink2'}
          strokeWidth={id === fits ? 2 : 1.4}
          strokeDasharray={DASHES[id]}
        />
      ))}
      {shown.slice(0, 2).map(({ id, label, atDb, density }, index) => {
        const predicted = likelihoods.find((hypothesis) => hypothesis.id === id)?.predictedScatterDb ?? 0;
        const left = index === 0;
        const place = atDb.findIndex((db) => db >= (left ? -1 : 1) * predicted);
        const tone = id === fits ? 'fill-est' : 'fill-ink2';
        return (
          <g key={id}>
            <text
              x={left ? 0 : WIDTH}
              y="10"
              textAnchor={left ? 'start' : 'end'}
              className={`${tone} font-medium`}
            >
              {label}
            </text>
            <text
              x={left ? 0 : WIDTH}
              y="23"
              textAnchor={left ? 'start' : 'end'}
              className={`${tone} font-mono`}
            >
              {fixed(predicted, 2)} dB
            </text>
            <path
              d={`M${left ? 30 : WIDTH - 30} 28L${x(atDb[place])} ${y(density[place] * binDb) - 3}`}
              className="stroke-ink3"
              strokeWidth="0.8"
            />
          </g>
        );
      })}
      <path d={`M0 ${FLOOR + 0.5}H${WIDTH}`} className="stroke-ink" />
      {ticks.map((db) => (
        <g key={db}>
          <path d={`M${x(db)} ${FLOOR}v4`} className="stroke-ink" />
          <text x={x(db)} y={FLOOR + 16} textAnchor="middle" className="fill-ink3 font-mono">
            {fixed(db, step < 1 ? 1 : 0, 'always')}
          </text>
        </g>
      ))}
      <text x={WIDTH} y={HEIGHT - 6} textAnchor="end" className="fill-ink3">
        residual about the mean level, dB
      </text>
    </svg>
  );
}
