import type { Estimate } from '../../../shared/estimate.ts';
import { level, uncertainty } from '../../lib/format.ts';

/** Tells readers the density and the verdict whenever they were computed anew. */
export function Announcer({ estimate, pending }: { estimate: Estimate | null; pending: boolean }) {
  const density = estimate?.density ?? null;
  const words =
    density === null
      ? 'No density can be given.'
      : `Noise density ${level(density.dbmPerHz, density.expandedUncertaintyDb)} dBm/Hz, plus or minus ${uncertainty(density.expandedUncertaintyDb)} dB.`;
  return (
    <div role="status" aria-live="polite" aria-atomic="true" className="sr-only">
      {estimate === null || pending ? '' : `${words} ${estimate.averagingCheck.sentence}`}
    </div>
  );
}
