import { useCallback, useMemo } from 'react';
import { useSearchParams } from 'react-router-dom';
import { z } from 'zod';
import { CaptureQuery, CaptureSort } from '../../../shared/capture.ts';
import type { CaptureFilters } from '../../api/captures.ts';
import { day } from '../../lib/time.ts';

/** Days back from today's midnight. */
export const SINCE = { today: 0, '7d': 7, '30d': 30, '365d': 365 } as const;
export type Since = keyof typeof SINCE;

const optional = <T extends z.ZodType>(schema: T) => schema.optional().catch(undefined);

/** What the address says about the table; anything that can't be read counts as not said. */
const Address = z.object({
  search: optional(z.string().max(200)),
  state: optional(CaptureQuery.shape.state),
  verdict: optional(CaptureQuery.shape.verdict),
  campaign: optional(z.uuid()),
  person: optional(z.uuid()),
  since: optional(z.enum(['today', '7d', '30d', '365d'])),
  sort: CaptureSort.catch('newest'),
  grouped: z.enum(['campaign', 'no']).catch('campaign'),
});
export type Address = z.infer<typeof Address>;

/** Midnight, in the viewer's zone, from which captures are shown. */
export function sinceDate(since: Since, now = new Date()): Date {
  const date = new Date(now.getFullYear(), now.getMonth(), now.getDate());
  date.setDate(date.getDate() - SINCE[since]);
  return date;
}

export const sinceWords = (since: Since): string =>
  since === 'today' ? 'today' : day(sinceDate(since).toISOString());

export function toQuery(address: Address): CaptureFilters {
  return {
    search: address.search || undefined,
    state: address.state,
    verdict: address.verdict,
    campaignId: address.campaign,
    personId: address.person,
    since: address.since === undefined ? undefined : sinceDate(address.since).toISOString(),
    sort: address.sort,
  };
}

export const isFiltered = ({ search, state, verdict, campaign, person, since }: Address): boolean =>
  [search, state, verdict, campaign, person, since].some((value) => value !== undefined && value !== '');

export interface Filtering {
  address: Address;
  query: CaptureFilters;
  filtered: boolean;
  /** Writes changes into the address; `replace` for typing, so that Back doesn't walk through letters. */
  change: (changes: Partial<Address>, replace?: boolean) => void;
  clear: () => void;
}

/** The table's filters, order and grouping, kept in the address. */
export function useFiltering(): Filtering {
  const [params, setParams] = useSearchParams();
  const text = params.toString();
  const address = useMemo(() => Address.parse(Object.fromEntries(new URLSearchParams(text))), [text]);
  const change = useCallback(
    (changes: Partial<Address>, replace = false) => {
      setParams(
        (before) => {
          const next = new URLSearchParams(before);
          for (const [name, value] of Object.entries(changes)) {
            const isDefault =
              (name === 'sort' && value === 'newest') || (name === 'grouped' && value === 'campaign');
            if (value === undefined || value === '' || isDefault) next.delete(name);
            else next.set(name, value);
          }
          return next;
        },
        { replace, preventScrollReset: true },
      );
    },
    [setParams],
  );
  const clear = useCallback(
    () =>
      change({
        search: undefined,
        state: undefined,
        verdict: undefined,
        campaign: undefined,
        person: undefined,
        since: undefined,
      }),
    [change],
  );
  return useMemo(
    () => ({ address, query: toQuery(address), filtered: isFiltered(address), change, clear }),
    [address, change, clear],
  );
}
