import clsx from 'clsx';
import { useState } from 'react';
import type { Spur } from '../../../../shared/estimate.ts';
import { LinkButton } from '../../../components/ui/button.tsx';
import { Section } from '../../../components/ui/section.tsx';
import { fixed, frequencyDecimals, frequencyScale, frequencyWords, plural } from '../../../lib/format.ts';
import type { SectionProps } from '../contract.ts';

const FIRST = 12;
const WIDTHS: Record<Spur['widthClass'], string> = {
  filter: 'as the filter',
  narrower: 'narrower',
  wider: 'wider',
};

interface SpursSectionProps extends SectionProps {
  spurHz: number | null;
  onSpur(hz: number | null): void;
}

/** Section 4: what stands out of the floor, and the spans that a person left out. */
export function SpursSection({ estimate, draft, readOnly, spurHz, onSpur }: SpursSectionProps) {
  const [all, setAll] = useState(false);
  if (estimate === null)
    return (
      <Section number={4} title="Spurs">
        {null}
      </Section>
    );
  const { spurs, exclusions, input } = estimate;
  const persons = exclusions.filter(({ kind }) => kind === 'person');
  const shown = all ? spurs : spurs.slice(0, FIRST);
  const scale = frequencyScale(input.lastHz);
  const decimals = Math.min(6, frequencyDecimals(input.spacingHz, scale));
  const inUnit = (hz: number) => fixed(hz / scale.hz, decimals);
  return (
    <Section
      number={4}
      title="Spurs"
      aside={spurs.length > 0 ? 'left out of the mean; level is the signal alone, floor removed' : undefined}
    >
      {spurs.length === 0 ? (
        <p className="py-1 text-table text-ink2">No spurs stand out of the floor.</p>
      ) : (
        <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Spurs">
          <table className="w-full min-w-[560px] text-table">
            <thead>
              <tr className="border-b border-line text-caption text-ink3">
                <th className="py-1 text-left font-normal">
                  <span className="sr-only">Spur</span>
                </th>
                <th className="py-1 text-right font-normal">{scale.unit}</th>
                <th className="py-1 text-right font-normal">dBm</th>
                <th className="py-1 text-right font-normal">over floor</th>
                <th className="py-1 text-right font-normal">left out</th>
                <th className="py-1 pl-4 text-left font-normal">width</th>
                <th className="py-1 text-left font-normal">spacing</th>
                <th className="py-1" />
              </tr>
            </thead>
            <tbody>
              {shown.map((spur, index) => (
                <tr
                  key={spur.hz}
                  className={clsx(
                    'h-8 border-b border-rule2 hover:bg-hover',
                    spur.hz === spurHz && 'bg-selected',
                  )}
                  onClick={() => onSpur(spur.hz === spurHz ? null : spur.hz)}
                >
                  <th scope="row" className="text-left font-mono font-normal text-spur">
                    S{index + 1}
                  </th>
                  <td className="text-right font-mono">{inUnit(spur.hz)}</td>
                  <td className="text-right font-mono">
                    {fixed(spur.correctedLevelDbm ?? spur.levelDbm, 1)}
                  </td>
                  <td className="text-right font-mono">{fixed(spur.excessDb, 1)} dB</td>
                  <td className="text-right font-mono">
                    {spur.leftOut ? plural(spur.points, 'point') : 'no'}
                  </td>
                  <td className="pl-4">{WIDTHS[spur.widthClass]}</td>
                  <td className="font-mono">{spur.family ? frequencyWords(spur.family.spacingHz) : ''}</td>
                  <td className="text-right">
                    {!readOnly && (
                      <LinkButton
                        onClick={(event) => {
                          event.stopPropagation();
                          if (spur.leftOut) draft.keep(spur.fromHz, spur.toHz);
                          else draft.forget(spur.fromHz, spur.toHz);
                        }}
                        aria-label={`${spur.leftOut ? 'Put back' : 'Leave out'} S${index + 1}`}
                      >
                        {spur.leftOut ? 'Put back' : 'Leave out'}
                      </LinkButton>
                    )}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {spurs.length > FIRST && (
        <LinkButton className="mt-2" onClick={() => setAll(!all)}>
          {all ? `Show the first ${FIRST}` : `Show all ${spurs.length}`}
        </LinkButton>
      )}
      {persons.length > 0 && (
        <ul className="mt-3 list-none p-0 text-table">
          {persons.map(({ fromHz, toHz, reason }) => (
            <li
              key={`${fromHz} ${toHz}`}
              className="flex items-baseline justify-between gap-3 border-b border-rule2 py-1.5"
            >
              <span>
                Left out by hand: <span className="font-mono">{inUnit(fromHz)}</span> to{' '}
                <span className="font-mono">{inUnit(toHz)}</span> {scale.unit}
                {reason && <span className="text-ink3">, {reason}</span>}
              </span>
              {!readOnly && <LinkButton onClick={() => draft.forget(fromHz, toHz)}>Put back</LinkButton>}
            </li>
          ))}
        </ul>
      )}
    </Section>
  );
}
