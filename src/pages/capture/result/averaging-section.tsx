import clsx from 'clsx';
import { Mark, markOfVerdict, type MarkKind } from '../../../components/ui/mark.tsx';
import { Section } from '../../../components/ui/section.tsx';
import { fixed } from '../../../lib/format.ts';
import type { SectionProps } from '../contract.ts';
import { AveragingPlot } from './averaging-plot.tsx';

const markOf = (fits: boolean): MarkKind => (fits ? 'fits' : 'none');

/** Section 3: was the trace averaged as declared? */
export function AveragingSection({ estimate, pending }: SectionProps) {
  if (estimate === null)
    return (
      <Section number={3} title="Averaging check">
        {null}
      </Section>
    );
  const { averagingCheck: check } = estimate;
  const { observedScatterDb: observed, observedScatterHighDb: high } = check;
  const decimals = observed !== null && observed < 0.3 ? 3 : 2;
  return (
    <Section
      number={3}
      title="Averaging check"
      aside={<Mark kind={markOfVerdict[check.verdict]}>{check.summary}</Mark>}
    >
      <div
        className={clsx(
          'grid grid-cols-[minmax(0,1.4fr)_minmax(0,1fr)] gap-6 max-phone:grid-cols-[minmax(0,1fr)] max-phone:gap-3',
          pending && 'opacity-60',
        )}
      >
        <AveragingPlot check={check} />
        <div>
          <p className="text-verdict">{check.sentence}</p>
          {check.verdict !== 'declared' && <p className="pt-1 text-table text-ink2">{check.advice}</p>}
          {check.likelihoods.length > 0 && (
            <table className="mt-3 w-full text-table">
              <thead>
                <tr className="border-b border-line text-left text-caption text-ink3">
                  <th className="py-1 font-normal">averaging</th>
                  <th className="py-1 text-right font-normal">predicted</th>
                  <th className="py-1 text-right font-normal">off by</th>
                </tr>
              </thead>
              <tbody>
                {check.likelihoods.map(({ id, label, fits, predictedScatterDb, sigmas }) => (
                  <tr key={id} className="border-b border-rule2">
                    <td className="py-1.5">
                      <Mark kind={markOf(fits)}>{label}</Mark>
                    </td>
                    <td className="py-1.5 text-right font-mono whitespace-nowrap">
                      {fixed(predictedScatterDb, decimals)} dB
                    </td>
                    <td className="py-1.5 text-right font-mono whitespace-nowrap">
                      {sigmas > 99 ? '> 99' : fixed(sigmas, 1)} σ
                    </td>
                  </tr>
                ))}
                {observed !== null && (
                  <tr className="border-b border-rule2 font-medium">
                    <td className="py-1.5">
                      observed{high === null ? '' : `, ± ${fixed(high - observed, decimals)}`}
                    </td>
                    <td className="py-1.5 text-right font-mono whitespace-nowrap">
                      {fixed(observed, decimals)} dB
                    </td>
                    <td />
                  </tr>
                )}
              </tbody>
            </table>
          )}
        </div>
      </div>
    </Section>
  );
}
