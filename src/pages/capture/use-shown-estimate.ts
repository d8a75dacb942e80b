import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Capture } from '../../../shared/capture.ts';
import type { Estimate } from '../../../shared/estimate.ts';
import { computeWhatIf, type EstimateAsk, estimateKeys, useEstimate } from '../../api/estimates.ts';
import type { Draft, DraftControls } from './contract.ts';

/** The request that a draft stands for. */
export const askOf = ({ traceIndex, exclusions, settings }: Draft): EstimateAsk => ({
  traceIndex,
  exclusions,
  ...(Object.keys(settings).length === 0 ? {} : { settings }),
});

export interface Shown {
  estimate: Estimate | null;
  /** A newer result is being computed or fetched. */
  pending: boolean;
  error: Error | null;
  retry: () => void;
}

/** What people set on the capture; a what-if rests on it without naming it. */
const stampOf = ({ settings }: Capture) =>
  Object.entries(settings).flatMap(([name, setting]) =>
    setting?.origin.kind === 'person' ? [`${name}=${setting.value}`] : [],
  );

/**
 * The estimate on screen: an older one where asked for, a what-if where the draft differs, else the latest.
 * The one before stays until the next is there.
 */
export function useShownEstimate(
  capture: Capture,
  latest: ReturnType<typeof useEstimate>,
  draft: DraftControls,
  olderId: string | null,
): Shown {
  const older = useEstimate(olderId);
  const readable = capture.state === 'ready' || capture.state === 'needsSettings';
  const asks = olderId === null && readable && draft.changed && capture.may.estimate && !latest.isLoading;
  const ask = askOf(draft.draft);
  const whatIf = useQuery({
    queryKey: [...estimateKeys.whatIf(capture.id, ask), capture.estimate?.id ?? '', ...stampOf(capture)],
    queryFn: ({ signal }) => computeWhatIf(capture.id, ask, signal),
    staleTime: Infinity,
    enabled: asks,
  });
  const active = olderId !== null ? older : asks ? whatIf : latest;
  const current = active.data ?? null;
  const [last, setLast] = useState<Estimate | null>(null);
  if (current !== null && current !== last) setLast(current);
  return {
    estimate: current ?? last,
    pending: active.isFetching && current === null,
    error: active.error,
    retry: () => void active.refetch(),
  };
}
