import { useEffect } from 'react';
import { useLocation } from 'react-router-dom';
import { useHealth } from '../../api/session.ts';
import { PageHead } from '../../components/layout/page-head.tsx';
import { Message } from '../../components/ui/message.tsx';
import { FormulaText } from './formula-text.tsx';
import { CAUTIONS, METHOD, type MethodSection } from './method-content.ts';

/** How each line is computed, with sources, limits and cautions. Ledger lines link here. */
export function MethodPage() {
  const { hash } = useLocation();
  const health = useHealth();
  useEffect(() => {
    if (hash !== '') document.getElementById(hash.slice(1))?.scrollIntoView();
  }, [hash]);
  return (
    <>
      <PageHead
        title="Method"
        below={`How a trace becomes a density${health.data === undefined ? '' : `, as engine ${health.data.engineVersion} computes it`}. Levels in dB are 10 lg of power; lg is the logarithm to base 10.`}
      />
      <div className="mt-5 grid gap-x-9 wide:grid-cols-[minmax(0,1fr)_220px]">
        <div className="grid max-w-[820px] content-start gap-7">
          {METHOD.map((section, index) => (
            <Step key={section.id} section={section} number={index + 1} />
          ))}
          <section id="cautions" aria-labelledby="cautions-title" className="scroll-mt-4 border-t border-ink">
            <Head number={METHOD.length + 1} id="cautions-title" title="Before you connect" />
            {CAUTIONS.map((caution) => (
              <Message key={caution} tone="caution" title={<span className="font-normal">{caution}</span>} />
            ))}
          </section>
        </div>
        <Contents />
      </div>
    </>
  );
}

function Head({ number, id, title }: { number: number; id: string; title: string }) {
  return (
    <div className="flex items-baseline gap-3 pt-2 pb-1.5">
      <span aria-hidden="true" className="w-4 font-mono text-caption text-ink3">
        {number}
      </span>
      <h2 id={id} className="text-body font-semibold">
        {title}
      </h2>
    </div>
  );
}

function Step({ section, number }: { section: MethodSection; number: number }) {
  const { id, title, paragraphs, formulas, check, limits, sources } = section;
  return (
    <section id={id} aria-labelledby={`${id}-title`} className="scroll-mt-4 border-t border-ink">
      <Head number={number} id={`${id}-title`} title={title} />
      <div className="grid gap-2 text-body">
        {paragraphs.map((paragraph) => (
          <p key={paragraph}>{paragraph}</p>
        ))}
      </div>
      <ul className="my-3 grid gap-1 border-l-2 border-est pl-3 text-[15px] leading-6">
        {formulas.map((formula) => (
          <li key={formula}>
            <FormulaText text={formula} />
          </li>
        ))}
      </ul>
      {check !== undefined && <CheckTable {...check} title={title} />}
      <dl className="mt-2 grid grid-cols-[52px_minmax(0,1fr)] gap-y-1 text-table text-ink2">
        <dt className="text-ink3">limits</dt>
        <dd className="grid gap-1">
          {limits.map((limit) => (
            <p key={limit}>{limit}</p>
          ))}
        </dd>
        <dt className="text-ink3">from</dt>
        <dd className="grid gap-1">
          {sources.map(({ basis, text }) => (
            <p key={text}>
              <span className="text-ink3">{basis}:</span> {text}
            </p>
          ))}
        </dd>
      </dl>
    </section>
  );
}

function CheckTable({ head, rows, title }: { head: string[]; rows: string[][]; title: string }) {
  return (
    <table className="mb-3 border-collapse text-table">
      <caption className="sr-only">Values of {title}</caption>
      <thead>
        <tr className="border-b border-line text-caption text-ink2">
          {head.map((cell, index) => (
            <th
              key={cell}
              scope="col"
              className={`py-1 font-normal ${index === 0 ? 'pr-8 text-left' : 'pl-6 text-right'}`}
            >
              {cell}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {rows.map((row) => (
          <tr key={row[0]} className="border-b border-rule2">
            {row.map((cell, index) =>
              index === 0 ? (
                <th key="head" scope="row" className="py-1 pr-8 text-left font-normal">
                  {cell}
                </th>
              ) : (
                <td key={head[index]} className="py-1 pl-6 text-right font-mono">
                  {cell}
                </td>
              ),
            )}
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function Contents() {
  return (
    <nav aria-label="Steps" className="text-table max-wide:hidden">
      <ol className="sticky top-6 grid gap-0.5 border-t border-ink pt-2">
        {[...METHOD, { id: 'cautions', title: 'Before you connect' }].map(({ id, title }, index) => (
          <li key={id} className="flex min-h-6 items-baseline gap-2.5">
            <span aria-hidden="true" className="w-4 font-mono text-caption text-ink3">
              {index + 1}
            </span>
            <a className="text-ink2 hover:text-est" href={`#${id}`}>
              {title}
            </a>
          </li>
        ))}
      </ol>
    </nav>
  );
}
