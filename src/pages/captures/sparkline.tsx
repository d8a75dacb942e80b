import { memo } from 'react';
import type { CaptureSummary } from '../../../shared/capture.ts';

const WIDTH = 104;
const TOP = 1;
const BOTTOM = 25;
const HEIGHT = 32;

/** The trace in small: min to max per part, ticks under spurs. Decoration; the cells beside it say it in words. */
export const Sparkline = memo(function Sparkline({ capture }: { capture: CaptureSummary }) {
  const { sparkline } = capture;
  if (sparkline === null || sparkline.min.length === 0) return <div className="h-8 w-[104px]" />;
  const { min, max, spurs } = sparkline;
  const low = Math.min(...min);
  const high = Math.max(...max);
  const range = Math.max(high - low, 3);
  const y = (level: number) => (TOP + ((high - level) / range) * (BOTTOM - TOP)).toFixed(1);
  const x = (i: number) => (((i + 0.5) / min.length) * WIDTH).toFixed(1);
  const path = min
    .map((level, i) => `${i === 0 ? 'M' : 'L'}${x(i)} ${y(max[i])}L${x(i)} ${y(level)}`)
    .join('');
  return (
    <svg
      aria-hidden="true"
      width={WIDTH}
      height={HEIGHT}
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      className="block"
    >
      <path d={path} fill="none" className="stroke-trace" strokeWidth=".7" strokeLinejoin="round" />
      {spurs.map((share, i) => (
        <path key={i} d={`M${(share * WIDTH).toFixed(1)} 28v4`} className="stroke-spur" strokeWidth="1.3" />
      ))}
    </svg>
  );
});
