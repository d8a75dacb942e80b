import type { Campaign, CaptureSummary } from '../../../shared/capture.ts';
import { countWords, fixed, NBSP } from '../../lib/format.ts';
import { axisOf, type Axis } from '../../components/plot/whisker.tsx';

export interface TableRow {
  capture: CaptureSummary;
  /** The axis that this row's whisker shares with its group. */
  axis: Axis | null;
}

export interface Group {
  id: string;
  name: string;
  /** Count and limit in words. */
  words: string;
  axis: Axis | null;
}

export type Item = { kind: 'group'; group: Group } | { kind: 'row'; row: TableRow; rowIndex: number };

export interface Density {
  dbmPerHz: number;
  expandedUncertaintyDb: number;
}

/** The density of a row's latest estimate; null where none could be given. */
export function densityOf({ estimate }: CaptureSummary): Density | null {
  if (estimate === null || estimate.dbmPerHz === null || estimate.expandedUncertaintyDb === null) return null;
  return { dbmPerHz: estimate.dbmPerHz, expandedUncertaintyDb: estimate.expandedUncertaintyDb };
}

const densities = (captures: readonly CaptureSummary[]) =>
  captures.map(densityOf).filter((density) => density !== null);

function groupWords(count: number, campaign: Campaign | undefined): string {
  const captures = count === 1 ? '1 capture' : `${countWords(count)} captures`;
  if (campaign === undefined) return captures;
  if (campaign.limitDbmPerHz === null) return `${captures}; no limit set`;
  return `${captures}; limit ${fixed(campaign.limitDbmPerHz, 1)}${NBSP}dBm/Hz, dashed`;
}

/**
 * The table's lines in order. Grouped: campaigns in the order in which they first appear, each with its own axis.
 * Otherwise one list with one axis, which the head shows.
 */
export function toItems(
  captures: readonly CaptureSummary[],
  campaigns: readonly Campaign[],
  grouped: boolean,
  countsAll: boolean,
): { items: Item[]; axis: Axis | null } {
  if (!grouped) {
    const axis = axisOf(densities(captures), null);
    return {
      items: captures.map((capture, rowIndex) => ({ kind: 'row', row: { capture, axis }, rowIndex })),
      axis,
    };
  }
  const byCampaign = new Map<string, CaptureSummary[]>();
  for (const capture of captures) {
    const id = capture.campaign?.id ?? '';
    const members = byCampaign.get(id);
    if (members === undefined) byCampaign.set(id, [capture]);
    else members.push(capture);
  }
  const items: Item[] = [];
  let rowIndex = 0;
  for (const [id, members] of byCampaign) {
    const campaign = campaigns.find((candidate) => candidate.id === id);
    const axis = axisOf(densities(members), campaign?.limitDbmPerHz ?? null);
    const count = countsAll && campaign !== undefined ? campaign.captures : members.length;
    const name = members[0].campaign?.name ?? 'No campaign';
    items.push({ kind: 'group', group: { id, name, words: groupWords(count, campaign), axis } });
    for (const capture of members) items.push({ kind: 'row', row: { capture, axis }, rowIndex: rowIndex++ });
  }
  return { items, axis: null };
}
