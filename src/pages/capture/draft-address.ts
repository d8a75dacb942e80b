import type { Capture } from '../../../shared/capture.ts';
import { ExclusionRequest, type Estimate } from '../../../shared/estimate.ts';

const SPAN = 'span';
const TRACE = 'trace';
const SHOWN = 'estimate';
const NO_SPAN = 'none';
const WORDS = { exclude: 'out', keep: 'in' } as const;

/** The requests that an estimate rests on, read back from what it left out. */
export function requestsOf(estimate: Estimate | null): ExclusionRequest[] {
  return (estimate?.exclusions ?? []).flatMap(({ kind, active, fromHz, toHz, reason }) => {
    if ((kind === 'automatic') === active) return [];
    const action = kind === 'person' ? ('exclude' as const) : ('keep' as const);
    return [{ fromHz, toHz, action, ...(reason === undefined ? {} : { reason }) }];
  });
}

const spanText = ({ action, fromHz, toHz, reason }: ExclusionRequest) =>
  [WORDS[action], `${fromHz}..${toHz}`, ...(reason === undefined ? [] : [reason])].join(' ');

/** Whether two lists of requests ask for the same, whatever their order. */
export const sameRequests = (a: readonly ExclusionRequest[], b: readonly ExclusionRequest[]): boolean =>
  a.map(spanText).sort().join('\n') === b.map(spanText).sort().join('\n');

function parseSpan(text: string): ExclusionRequest[] {
  const match = /^(out|in) (\S+?)\.\.(\S+)(?: (.*))?$/s.exec(text);
  if (match === null) return [];
  const parsed = ExclusionRequest.safeParse({
    action: match[1] === 'out' ? 'exclude' : 'keep',
    fromHz: Number(match[2]),
    toHz: Number(match[3]),
    reason: match[4],
  });
  return parsed.success && parsed.data.fromHz <= parsed.data.toHz ? [parsed.data] : [];
}

/** What the address says about the draft; null: as in the estimate that is kept. */
export interface DraftAddress {
  traceIndex: number | null;
  exclusions: ExclusionRequest[] | null;
}

/** Reads trace and spans from the address; what can't be read counts as not said. */
export function readAddress(params: URLSearchParams, traces: number): DraftAddress {
  const spans = params.getAll(SPAN);
  const trace = Number(params.get(TRACE) ?? Number.NaN);
  return {
    traceIndex: Number.isInteger(trace) && trace >= 1 && trace <= traces ? trace - 1 : null,
    exclusions: spans.length === 0 ? null : spans.flatMap(parseSpan),
  };
}

/** The address with this draft in it. */
export function writeAddress(params: URLSearchParams, address: DraftAddress): URLSearchParams {
  const next = new URLSearchParams(params);
  next.delete(SPAN);
  next.delete(TRACE);
  if (address.traceIndex !== null) next.set(TRACE, String(address.traceIndex + 1));
  const texts = address.exclusions?.length === 0 ? [NO_SPAN] : (address.exclusions?.map(spanText) ?? []);
  for (const text of texts) next.append(SPAN, text);
  return next;
}

/** Id of the older estimate that the address asks to show; null: the latest, or the draft. */
export function shownIdOf(params: URLSearchParams, { estimates, estimate }: Capture): string | null {
  const number = Number(params.get(SHOWN) ?? Number.NaN);
  const found = estimates.find((candidate) => candidate.number === number);
  return found === undefined || found.id === estimate?.id ? null : found.id;
}

/** The address that shows an older estimate, or the latest where null. */
export function withShown(
  params: URLSearchParams,
  { estimates }: Capture,
  id: string | null,
): URLSearchParams {
  const next = new URLSearchParams(params);
  const found = estimates.find((candidate) => candidate.id === id);
  if (found === undefined) next.delete(SHOWN);
  else next.set(SHOWN, String(found.number));
  return next;
}
