import clsx from 'clsx';
import type { Capture } from '../../../../shared/capture.ts';
import { Section } from '../../../components/ui/section.tsx';
import { level, uncertainty } from '../../../lib/format.ts';
import { axisOf, Whisker, WhiskerAxis } from '../../../components/plot/whisker.tsx';
import { shortTime } from '../../../lib/time.ts';

interface EstimatesSectionProps {
  capture: Capture;
  /** The older estimate that is looked at; null: the latest. */
  shownId: string | null;
  onShow(id: string | null): void;
}

/** Section 7: the history of estimates, newest first, on one axis; any of them can be looked at. */
export function EstimatesSection({ capture, shownId, onShow }: EstimatesSectionProps) {
  const { estimates } = capture;
  const values = estimates.flatMap(({ dbmPerHz, expandedUncertaintyDb }) =>
    dbmPerHz === null || expandedUncertaintyDb === null ? [] : [{ dbmPerHz, expandedUncertaintyDb }],
  );
  const axis = axisOf(values, null);
  const current = shownId ?? estimates[0]?.id;
  return (
    <Section number={7} title="Estimates">
      {estimates.length === 0 ? (
        <p className="py-1 text-table text-ink2">None is kept yet.</p>
      ) : (
        <table className="w-full text-table">
          <thead>
            <tr className="border-b border-line text-caption text-ink3">
              <th className="w-6 py-1 text-left font-normal">
                <span className="sr-only">Number</span>
              </th>
              <th className="py-1 text-left font-normal">What changed</th>
              <th className="py-1 text-right font-normal">dBm/Hz</th>
              <th className="py-1 text-right font-normal">U</th>
              <th className="w-36 py-1 pl-2 text-left font-normal max-phone:hidden">
                {axis ? <WhiskerAxis axis={axis} /> : <span className="sr-only">On one axis</span>}
              </th>
            </tr>
          </thead>
          <tbody>
            {estimates.map((estimate, index) => {
              const { id, number, change, createdBy, createdAt, dbmPerHz, expandedUncertaintyDb } = estimate;
              return (
                <tr
                  key={id}
                  aria-current={id === current ? 'true' : undefined}
                  className={clsx(
                    'border-b border-rule2 align-baseline hover:bg-hover',
                    id === current && 'bg-selected',
                  )}
                >
                  <td className="py-1.5 font-mono text-caption text-ink3">{number}</td>
                  <td className="py-1.5">
                    <button
                      type="button"
                      className="min-h-6 cursor-pointer text-left hover:text-est"
                      aria-label={`Show estimate ${number}: ${change}`}
                      onClick={() => onShow(index === 0 ? null : id)}
                    >
                      {change}
                    </button>
                    <span className="block text-caption text-ink3">
                      {createdBy}, {shortTime(createdAt)}
                    </span>
                  </td>
                  <td
                    className={clsx(
                      'py-1.5 text-right font-mono whitespace-nowrap',
                      index === 0 && 'font-medium',
                    )}
                  >
                    {dbmPerHz === null ? 'none' : level(dbmPerHz, expandedUncertaintyDb)}
                  </td>
                  <td className="py-1.5 pl-3 text-right font-mono">
                    {expandedUncertaintyDb === null ? '' : uncertainty(expandedUncertaintyDb)}
                  </td>
                  <td className="py-1.5 pl-2 max-phone:hidden">
                    {axis && dbmPerHz !== null && expandedUncertaintyDb !== null && (
                      <Whisker axis={axis} value={{ dbmPerHz, expandedUncertaintyDb }} height={20} />
                    )}
                  </td>
                </tr>
              );
            })}
          </tbody>
        </table>
      )}
    </Section>
  );
}
