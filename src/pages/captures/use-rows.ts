import { keepPreviousData, useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Campaign, Person } from '../../../shared/capture.ts';
import { captureListOptions } from '../../api/captures.ts';
import type { Filtering } from './filters.ts';
import { toItems } from './rows.ts';

/** The captures under the present filters, laid out in groups; the previous ones stay while new filters load. */
export function useRows(
  labId: string,
  { address, query, filtered }: Filtering,
  campaigns: readonly Campaign[],
) {
  const list = useInfiniteQuery({ ...captureListOptions(labId, query), placeholderData: keepPreviousData });
  const captures = useMemo(() => list.data?.pages.flatMap(({ items }) => items) ?? [], [list.data]);
  const grouped = address.grouped === 'campaign';
  const layout = useMemo(
    () => toItems(captures, campaigns, grouped, !filtered),
    [captures, campaigns, grouped, filtered],
  );
  const people = useMemo(() => {
    const byId = new Map<string, Person>(captures.map(({ uploadedBy }) => [uploadedBy.id, uploadedBy]));
    return [...byId.values()].sort((a, b) => a.name.localeCompare(b.name));
  }, [captures]);
  return { list, captures, grouped, people, ...layout, total: list.data?.pages.at(0)?.total ?? null };
}
