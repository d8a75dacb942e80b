import { useLate } from '../../../lib/use-late.ts';

const HEADS = ['Trace', 'Ledger', 'Averaging check'];

/** Real heads over blank bars, once loading has lasted 200 ms. */
export function LoadingState() {
  const late = useLate(true);
  return (
    <div
      role="status"
      aria-label="Loading the capture"
      className={late ? 'grid gap-7' : 'invisible grid gap-7'}
    >
      <title>Capture · Perhertz</title>
      <span className="block h-6 w-[45%] bg-rule2" />
      {HEADS.map((head, index) => (
        <div key={head} className="border-t border-ink pt-2">
          <p className="text-body font-semibold">
            <span aria-hidden="true" className="mr-3 font-mono text-caption font-normal text-ink3">
              {index + 1}
            </span>
            {head}
          </p>
          {['82%', '64%', '71%'].map((width) => (
            <span key={width} className="mt-4 block h-2 bg-rule2" style={{ width }} />
          ))}
        </div>
      ))}
    </div>
  );
}
