import { useState } from 'react';
import type { Points } from '../../../../shared/capture.ts';
import type { Exclusion } from '../../../../shared/estimate.ts';
import { LinkButton } from '../../../components/ui/button.tsx';
import { countWords, fixed } from '../../../lib/format.ts';
import { mergedSpans } from './plot-data.ts';

const ROWS = 100;

/** The shown points as a table, a hundred at a time; parts with lowest and highest level where the points don't fit. */
export function TraceTable({ points, exclusions }: { points: Points; exclusions: Exclusion[] }) {
  const [page, setPage] = useState(0);
  const spans = mergedSpans(exclusions);
  const used = (hz: number) => !spans.some(({ fromHz, toHz }) => hz >= fromHz && hz <= toHz);
  const pages = Math.max(1, Math.ceil(points.hz.length / ROWS));
  const at = Math.min(page, pages - 1);
  const first = at * ROWS;
  const levels = (i: number) =>
    points.form === 'exact' ? [points.level[i]] : [points.min[i], points.max[i]];
  return (
    <div className="mt-2">
      <div
        className="max-h-80 overflow-auto border-y border-rule"
        tabIndex={0}
        role="region"
        aria-label="Trace as a table"
      >
        <table className="w-full text-table">
          <thead>
            <tr className="sticky top-0 border-b border-line bg-paper text-caption text-ink3">
              <th className="py-1 text-right font-normal">MHz</th>
              {(points.form === 'exact'
                ? [points.unit]
                : [`lowest, ${points.unit}`, `highest, ${points.unit}`]
              ).map((head) => (
                <th key={head} className="py-1 text-right font-normal">
                  {head}
                </th>
              ))}
              <th className="py-1 pl-4 text-left font-normal">in the mean</th>
            </tr>
          </thead>
          <tbody>
            {points.hz.slice(first, first + ROWS).map((hz, i) => (
              <tr key={`${hz} ${i}`} className="border-b border-rule2 font-mono">
                <td className="text-right">{fixed(hz / 1e6, 6)}</td>
                {levels(first + i).map((level, column) => (
                  <td key={column} className="text-right">
                    {fixed(level, 2)}
                  </td>
                ))}
                <td className="pl-4 font-sans">{used(hz) ? 'yes' : 'left out'}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="flex gap-4 pt-1 text-caption text-ink3">
        <span>
          {countWords(first + 1)} to {countWords(Math.min(points.hz.length, first + ROWS))} of{' '}
          {countWords(points.hz.length)}
          {points.form === 'buckets' && ' parts; zoom in for single points'}
        </span>
        {at > 0 && <LinkButton onClick={() => setPage(at - 1)}>Earlier</LinkButton>}
        {at < pages - 1 && <LinkButton onClick={() => setPage(at + 1)}>Later</LinkButton>}
      </p>
    </div>
  );
}
