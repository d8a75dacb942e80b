import { keepPreviousData, queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { Estimate, EstimateRequest } from '../../shared/estimate.ts';
import { captureKeys } from './captures.ts';
import { request } from './http.ts';

/** What to compute; fields with defaults may be left out. */
export type EstimateAsk = z.input<typeof EstimateRequest>;

export const estimateKeys = {
  detail: (id: string) => ['estimates', 'detail', id] as const,
  whatIf: (captureId: string, ask: EstimateAsk) => ['estimates', 'whatIf', captureId, ask] as const,
};

/** A kept estimate never changes apart from its state. */
export const estimateOptions = (id: string) =>
  queryOptions({
    queryKey: estimateKeys.detail(id),
    queryFn: ({ signal }) => request(Estimate, `/api/estimates/${id}`, { signal }),
    staleTime: 60_000,
  });

export const useEstimate = (id: string | null) =>
  useQuery({ ...estimateOptions(id ?? ''), enabled: id !== null });

/** Computes without keeping. Aborts when `signal` does. */
export const computeWhatIf = (captureId: string, ask: EstimateAsk, signal?: AbortSignal): Promise<Estimate> =>
  request(Estimate, `/api/captures/${captureId}/estimates?keep=false`, { method: 'POST', body: ask, signal });

/** The unsaved result for these settings and exclusions; the previous one stays on screen until the new one is there. */
export const whatIfOptions = (captureId: string, ask: EstimateAsk) =>
  queryOptions({
    queryKey: estimateKeys.whatIf(captureId, ask),
    queryFn: ({ signal }) => computeWhatIf(captureId, ask, signal),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    gcTime: 10 * 60_000,
  });

export const keepEstimate = (captureId: string, ask: EstimateAsk): Promise<Estimate> =>
  request(Estimate, `/api/captures/${captureId}/estimates`, { method: 'POST', body: ask });

/** Computes and keeps a numbered estimate. */
export function useKeepEstimate(captureId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (ask: EstimateAsk) => keepEstimate(captureId, ask),
    onSuccess: (estimate) => {
      if (estimate.id !== null) client.setQueryData(estimateKeys.detail(estimate.id), estimate);
      void client.invalidateQueries({ queryKey: captureKeys.detail(captureId) });
      void client.invalidateQueries({ queryKey: captureKeys.lists });
    },
  });
}
