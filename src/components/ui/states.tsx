import type { ReactNode } from 'react';
import { ApiProblem } from '../../api/http.ts';
import { useLate } from '../../lib/use-late.ts';
import { LinkButton } from './button.tsx';
import { Message } from './message.tsx';

/** Nothing here yet: one sentence and what to do. */
export function EmptyState({ sentence, children }: { sentence: ReactNode; children?: ReactNode }) {
  return (
    <div className="py-10">
      <p className="text-verdict">{sentence}</p>
      {children !== undefined && (
        <div className="mt-3 flex flex-wrap items-center gap-3 text-table text-ink2">{children}</div>
      )}
    </div>
  );
}

/** What went wrong, what it means for the data, and a way on. */
export function ErrorState({ what, error, onRetry }: { what: string; error: unknown; onRetry?: () => void }) {
  const requestId = error instanceof ApiProblem ? error.problem.requestId : undefined;
  return (
    <Message
      tone="stopped"
      live="assertive"
      title={what}
      actions={onRetry !== undefined && <LinkButton onClick={onRetry}>Try again</LinkButton>}
    >
      {error instanceof Error ? error.message : 'Something failed that wasn’t foreseen.'}
      {requestId !== undefined && (
        <>
          {' '}
          Request <span className="font-mono">{requestId}</span>.
        </>
      )}
    </Message>
  );
}

/** Blank bars under a table's real heads, shown when loading takes more than 200 ms. */
export function LoadingRows({ columns, rows = 5, label }: { columns: string; rows?: number; label: string }) {
  const late = useLate(true);
  const count = columns.split(' ').length;
  return (
    <div role="status" aria-label={label} className={late ? '' : 'invisible'}>
      {Array.from({ length: rows }, (_, row) => (
        <div
          key={row}
          className="grid gap-6 border-b border-rule2 py-[17px]"
          style={{ gridTemplateColumns: columns }}
        >
          {Array.from({ length: count }, (_, column) => (
            <span
              key={column}
              className="block h-2 bg-rule2"
              style={{ width: `${60 + ((row * 17 + column * 29) % 36)}%` }}
            />
          ))}
        </div>
      ))}
    </div>
  );
}
