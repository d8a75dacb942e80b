import { Link } from 'react-router-dom';
import type { LedgerLine } from '../../../../shared/estimate.ts';
import { fixed } from '../../../lib/format.ts';

const ANCHORS: Record<string, string> = {
  mean: 'mean',
  bias: 'averaging-bias',
  bandwidth: 'noise-bandwidth',
  ownNoise: 'own-noise',
  level: 'level',
  gain: 'external-gain',
  skirts: 'spurs',
};

/** What stands behind a line of the ledger: formula, inputs with their origin, check, uncertainty, source. */
export function LedgerRowDetails({ line, percent }: { line: LedgerLine; percent: number | null }) {
  const rows: [string, React.ReactNode][] = [
    ...line.inputs.map(({ name, value, origin }): [string, React.ReactNode] => [
      'with',
      <>
        <span className="font-mono">
          {name} = {value}
        </span>
        <span className="text-ink3">, {origin}</span>
      </>,
    ]),
    ...(line.check === undefined ? [] : [['check', line.check] satisfies [string, React.ReactNode]]),
    [
      'u',
      line.uncertaintyDb === null ? (
        'not stated'
      ) : (
        <>
          <span className="font-mono">{fixed(line.uncertaintyDb, 3)} dB</span>
          {percent !== null && `, ${percent} % of U²`}
        </>
      ),
    ],
    [
      'from',
      <Link className="link" to={`/method#${ANCHORS[line.id] ?? 'mean'}`}>
        {line.source}
      </Link>,
    ],
  ];
  return (
    <div className="pb-3 pl-7">
      <p className="py-1.5 text-body">{line.formula}</p>
      <dl className="grid grid-cols-[44px_minmax(0,1fr)] gap-x-2 gap-y-0.5 text-caption">
        {rows.map(([name, content], index) => (
          <div key={index} className="contents">
            <dt className="text-ink3">{index > 0 && rows[index - 1][0] === name ? '' : name}</dt>
            <dd className="m-0 break-words text-ink2">{content}</dd>
          </div>
        ))}
      </dl>
    </div>
  );
}
