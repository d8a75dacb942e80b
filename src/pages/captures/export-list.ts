import type { CaptureSummary } from '../../../shared/capture.ts';
import { fetchAllCaptures, type CaptureFilters } from '../../api/captures.ts';
import { csv, download } from '../../lib/csv.ts';
import { rowState } from './state-words.ts';

const HEAD = [
  'number',
  'name',
  'file',
  'sha256',
  'campaign',
  'state',
  'centreHz',
  'spanHz',
  'rbwHz',
  'points',
  'averagingVerdict',
  'averagingSummary',
  'densityDbmPerHz',
  'statisticalLowDbmPerHz',
  'statisticalHighDbmPerHz',
  'expandedUncertaintyDb',
  'spurs',
  'uploadedBy',
  'uploadedAt',
];

function line(capture: CaptureSummary): (string | number | null)[] {
  const { estimate } = capture;
  return [
    capture.number,
    capture.name,
    capture.fileName,
    capture.sha256,
    capture.campaign?.name ?? null,
    rowState(capture).word,
    capture.centreHz,
    capture.spanHz,
    capture.rbwHz,
    capture.points,
    estimate?.verdict ?? null,
    estimate?.verdictSummary ?? null,
    estimate?.dbmPerHz ?? null,
    estimate?.lowDbmPerHz ?? null,
    estimate?.highDbmPerHz ?? null,
    estimate?.expandedUncertaintyDb ?? null,
    estimate?.spurs ?? null,
    capture.uploadedBy.name,
    capture.uploadedAt,
  ];
}

/** Downloads these captures as CSV, values in full precision. */
export function exportList(captures: readonly CaptureSummary[]): void {
  download(`captures-${new Date().toISOString().slice(0, 10)}.csv`, csv(HEAD, captures.map(line)));
}

/** Downloads every capture under these filters, not only the pages on screen. */
export async function exportWholeList(labId: string, filters: CaptureFilters): Promise<void> {
  exportList(await fetchAllCaptures(labId, filters));
}
