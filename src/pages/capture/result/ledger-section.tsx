import clsx from 'clsx';
import { useState } from 'react';
import { LinkButton } from '../../../components/ui/button.tsx';
import { Section } from '../../../components/ui/section.tsx';
import {
  correction,
  countWords,
  decimalsFor,
  fixed,
  NBSP,
  plural,
  significant,
} from '../../../lib/format.ts';
import type { Highlight, SectionProps } from '../contract.ts';
import { ledgerTsv } from '../ledger-tsv.ts';
import { IntervalGraphic } from './interval-graphic.tsx';
import { LedgerRowDetails } from './ledger-row-details.tsx';
import { ledgerRows, type LedgerRow } from './ledger-rows.ts';

const GRID =
  'grid grid-cols-[20px_minmax(0,1fr)_72px_76px_68px] max-phone:grid-cols-[20px_minmax(0,1fr)_72px_76px] items-baseline gap-x-2';
const PX_PER_PERCENT = 0.62;

/** Section 2: the walk from the reading to the density, line by line, and the result with its intervals. */
export function LedgerSection({
  estimate,
  pending,
  onHighlight,
}: SectionProps & { onHighlight(highlight: Highlight): void }) {
  const [copied, setCopied] = useState<string | null>(null);
  if (estimate === null)
    return (
      <Section number={2} title="Ledger">
        {null}
      </Section>
    );
  const { rows, roundingDb } = ledgerRows(estimate.ledger);
  const { density } = estimate;
  const copy = (what: string, text: string) =>
    void navigator.clipboard.writeText(text).then(() => setCopied(what));
  const decimals = density ? Math.max(2, decimalsFor(density.expandedUncertaintyDb)) : 2;
  return (
    <Section
      number={2}
      title="Ledger"
      aside={
        <span className="inline-flex gap-3">
          <span className="max-phone:hidden">the bar is the share of U²</span>
          <LinkButton onClick={() => copy('ledger', ledgerTsv(estimate))}>
            {copied === 'ledger' ? 'Copied' : 'Copy'}
          </LinkButton>
        </span>
      }
    >
      <div className={clsx('transition-opacity duration-[120ms]', pending && 'opacity-60')}>
        <div className={clsx(GRID, 'border-b border-line pb-1 text-caption text-ink3')} aria-hidden="true">
          <span />
          <span>from reading to result</span>
          <span className="text-right">value</span>
          <span className="text-right">running</span>
          <span className="text-right max-phone:hidden">share, %</span>
        </div>
        {rows.map((row) => (
          <Row key={row.line.id} row={row} onHighlight={onHighlight} />
        ))}
        {roundingDb !== 0 && (
          <div className={clsx(GRID, 'border-b border-rule2 py-1.5 text-caption text-ink3')}>
            <span />
            <span>rounding of the lines above</span>
            <span className="text-right font-mono">{correction(roundingDb)}</span>
            <span className="text-right font-mono">
              {fixed((rows.at(-1)?.runningDb ?? 0) + roundingDb, 2)}
            </span>
          </div>
        )}
        <div className="border-t-[3px] border-double border-ink" />
        {density === null ? (
          <NoDensity estimate={estimate} />
        ) : (
          <>
            <div className="flex items-baseline justify-between gap-3 pt-2">
              <span className="text-body font-semibold">Noise density</span>
              <button
                type="button"
                className="cursor-copy text-right"
                title="Copy the value"
                onClick={() =>
                  copy('density', `${fixed(density.dbmPerHz, decimals).replace('−', '-')} dBm/Hz`)
                }
              >
                <span className="font-mono text-result text-est" data-testid="density">
                  {fixed(density.dbmPerHz, decimals)}
                </span>
                <span className="ml-1.5 text-body text-ink3">
                  {copied === 'density' ? 'copied' : 'dBm/Hz'}
                </span>
              </button>
            </div>
            <IntervalGraphic density={density} />
            <dl className="grid grid-cols-[minmax(0,1fr)_auto] gap-y-1 border-b border-ink pb-2 text-table">
              <dt>95 %, statistics alone</dt>
              <dd className="m-0 text-right font-mono">
                {fixed(density.lowDbmPerHz, decimals)} … {fixed(density.highDbmPerHz, decimals)}
              </dd>
              <dt>expanded uncertainty, k = {significant(density.coverageFactor, 3)}</dt>
              <dd className="m-0 text-right font-mono">
                U = {fixed(density.expandedUncertaintyDb, decimals)}
                {NBSP}dB
              </dd>
            </dl>
            <p className="flex flex-wrap justify-between gap-x-4 pt-2 text-caption text-ink3">
              <span>
                {plural(estimate.input.usedPoints, 'point')},{' '}
                {countWords(Math.round(density.effectivePoints))} independent
              </span>
              <span>
                {fixed(Math.abs(density.aboveThermalDb), 1)} dB{' '}
                {density.aboveThermalDb < 0 ? 'below' : 'above'} kT at 290 K
              </span>
            </p>
          </>
        )}
      </div>
    </Section>
  );
}

function Row({ row, onHighlight }: { row: LedgerRow; onHighlight(highlight: Highlight): void }) {
  const { line, letter, shownDb, runningDb, percent } = row;
  const value = line.kind === 'reading' ? fixed(shownDb, 2) : correction(shownDb);
  return (
    <details
      className="group border-b border-rule2 hover:bg-hover"
      data-ledger={line.id}
      onMouseEnter={() => onHighlight(line.id)}
      onMouseLeave={() => onHighlight(null)}
      onFocus={() => onHighlight(line.id)}
      onBlur={() => onHighlight(null)}
    >
      <summary className={clsx(GRID, 'cursor-pointer list-none py-1.5')}>
        <span className="font-mono text-caption text-ink3">{letter}</span>
        <span>
          <span className="block text-body">
            {line.label}{' '}
            <svg
              aria-hidden="true"
              width="8"
              height="8"
              viewBox="0 0 8 8"
              className="inline text-est transition-transform duration-[120ms] group-open:rotate-90"
            >
              <path d="M2 1l3.5 3L2 7" fill="none" stroke="currentColor" strokeWidth="1.4" />
            </svg>
          </span>
          <span className="block text-caption text-ink3">{line.caption}</span>
        </span>
        <span className="text-right font-mono text-body" data-value>
          {value}
        </span>
        <span className="text-right font-mono text-table text-ink3">
          <span className="sr-only">running </span>
          {fixed(runningDb, 2)}
        </span>
        <span className="flex items-baseline justify-end gap-1.5 font-mono text-caption text-ink3 max-phone:hidden">
          {percent !== null && (
            <>
              <span
                className="inline-block h-1.5 bg-est opacity-75"
                style={{ width: Math.max(1, Math.min(44, percent * PX_PER_PERCENT)) }}
              />
              <span className="w-6 text-right">
                {percent}
                <span className="sr-only"> percent of the uncertainty</span>
              </span>
            </>
          )}
        </span>
      </summary>
      <LedgerRowDetails line={line} percent={percent} />
    </details>
  );
}

function NoDensity({ estimate }: { estimate: NonNullable<SectionProps['estimate']> }) {
  const stop = estimate.findings.find(({ severity }) => severity === 'stop');
  return (
    <div className="border-b border-ink py-3">
      <p className="text-verdict">{stop ? stop.message : 'No density can be given.'}</p>
      <p className="pt-1 text-table text-ink2">{stop?.advice}</p>
      {estimate.alternatives.length > 0 && (
        <table className="mt-2 w-full text-table">
          <tbody>
            {estimate.alternatives.map(({ label, when, dbmPerHz, lowDbmPerHz, highDbmPerHz }) => (
              <tr key={label} className="border-t border-rule2">
                <th scope="row" className="py-1.5 text-left font-normal">
                  {when}
                </th>
                <td className="py-1.5 text-right font-mono whitespace-nowrap">
                  {fixed(dbmPerHz, 2)}
                  {NBSP}
                  <span className="font-sans text-ink3">dBm/Hz</span>
                  <span className="block text-caption text-ink3">
                    {fixed(lowDbmPerHz, 2)} … {fixed(highDbmPerHz, 2)}
                  </span>
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </div>
  );
}
