import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { Points } from '../../shared/capture.ts';
import { queryString, request } from './http.ts';

export interface PointsAsk {
  fromHz?: number;
  toHz?: number;
  /** At most this many parts when the points don't fit. */
  buckets?: number;
}

/** Points of a trace for the plot: exact where they fit, else min and max per bucket. They never change. */
export const pointsOptions = (captureId: string, traceIndex: number, ask: PointsAsk = {}) =>
  queryOptions({
    queryKey: ['points', captureId, traceIndex, ask] as const,
    queryFn: ({ signal }) =>
      request(Points, `/api/captures/${captureId}/traces/${traceIndex}/points${queryString({ ...ask })}`, {
        signal,
      }),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
  });
