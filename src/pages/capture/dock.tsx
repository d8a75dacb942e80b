import type { ReactNode } from 'react';
import type { Estimate } from '../../../shared/estimate.ts';
import { decimalsFor, fixed, uncertainty } from '../../lib/format.ts';

/** On phones: the density and the primary action at the foot of the window. */
export function Dock({
  estimate,
  pending,
  action,
}: {
  estimate: Estimate | null;
  pending: boolean;
  action: ReactNode;
}) {
  const density = estimate?.density ?? null;
  return (
    <div
      role="region"
      aria-label="Result"
      className="sticky bottom-0 z-20 -mx-4 mt-7 -mb-10 flex items-center gap-3 border-t border-ink bg-sheet px-4 py-2.5 phone:hidden print:hidden"
    >
      <div className={pending ? 'mr-auto text-ink3' : 'mr-auto'}>
        <div className="text-caption text-ink2">{pending ? 'computing' : 'Noise density, dBm/Hz'}</div>
        {density === null ? (
          <div className="text-table">{estimate === null ? '–' : 'no density can be given'}</div>
        ) : (
          <div className="font-mono whitespace-nowrap">
            <span className={pending ? 'text-[24px] leading-7' : 'text-[24px] leading-7 text-est'}>
              {fixed(density.dbmPerHz, Math.max(2, decimalsFor(density.expandedUncertaintyDb)))}
            </span>{' '}
            <span className="text-caption text-ink2">± {uncertainty(density.expandedUncertaintyDb)}</span>
          </div>
        )}
      </div>
      {action}
    </div>
  );
}
