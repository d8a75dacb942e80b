import {
  infiniteQueryOptions,
  queryOptions,
  useMutation,
  useQuery,
  useQueryClient,
} from '@tanstack/react-query';
import { z } from 'zod';
import { Capture, type CaptureChanges, type CaptureQuery, CaptureSummary } from '../../shared/capture.ts';
import { page } from '../../shared/problem.ts';
import { queryString, request } from './http.ts';

export type CaptureFilters = Omit<CaptureQuery, 'cursor' | 'limit'>;

export const captureKeys = {
  all: ['captures'] as const,
  lists: ['captures', 'list'] as const,
  list: (labId: string, filters: CaptureFilters) => ['captures', 'list', labId, filters] as const,
  detail: (id: string) => ['captures', 'detail', id] as const,
};

/** The list may also say how many there are in all; older servers don't. */
const CapturePage = page(CaptureSummary).extend({ total: z.number().int().optional() });
export type CapturePage = z.infer<typeof CapturePage>;

/** A lab's captures in pages of 100, by cursor. */
export const captureListOptions = (labId: string, filters: CaptureFilters) =>
  infiniteQueryOptions({
    queryKey: captureKeys.list(labId, filters),
    queryFn: ({ pageParam, signal }) =>
      request(
        CapturePage,
        `/api/labs/${labId}/captures${queryString({ ...filters, cursor: pageParam, limit: 100 })}`,
        {
          signal,
        },
      ),
    initialPageParam: '',
    getNextPageParam: (last) => last.nextCursor,
    staleTime: 15_000,
  });

/** One capture with traces, settings, problems and its estimates. */
export const captureOptions = (id: string) =>
  queryOptions({
    queryKey: captureKeys.detail(id),
    queryFn: ({ signal }) => request(Capture, `/api/captures/${id}`, { signal }),
    staleTime: 30_000,
  });

export const useCapture = (id: string) => useQuery(captureOptions(id));

export const changeCapture = (id: string, changes: CaptureChanges): Promise<Capture> =>
  request(Capture, `/api/captures/${id}`, { method: 'PATCH', body: changes });

/** Changes name, campaign or settings of a capture; the answer replaces the cached capture. */
export function useChangeCapture(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (changes: CaptureChanges) => changeCapture(id, changes),
    onSuccess: (capture) => {
      client.setQueryData(captureKeys.detail(id), capture);
      void client.invalidateQueries({ queryKey: captureKeys.lists });
    },
  });
}

/** Address of the very bytes that were uploaded. */
export const captureFileUrl = (id: string) => `/api/captures/${id}/file`;

/** Every capture under these filters, page after page. */
export async function fetchAllCaptures(labId: string, filters: CaptureFilters): Promise<CaptureSummary[]> {
  const items: CaptureSummary[] = [];
  let cursor: string | undefined;
  do {
    const path = `/api/labs/${labId}/captures${queryString({ ...filters, cursor, limit: 200 })}`;
    const answer: CapturePage = await request(CapturePage, path);
    items.push(...answer.items);
    cursor = answer.nextCursor ?? undefined;
  } while (cursor !== undefined);
  return items;
}
