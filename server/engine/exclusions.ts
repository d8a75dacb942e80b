import type { Exclusion, ExclusionRequest } from '../../shared/estimate.ts';

/** A span that the spur search wants left out, with the frequency of its peak. */
export interface AutomaticSpan {
  hz: number;
  fromHz: number;
  toHz: number;
}

export interface AppliedExclusions {
  /** 1 where a point is left out of the mean; one entry per point. */
  leftOut: Uint8Array;
  exclusions: Exclusion[];
  /** For each automatic span: is it left out? */
  spanLeftOut: boolean[];
}

function markSpan(mask: Uint8Array, frequencyHz: Float64Array, fromHz: number, toHz: number): void {
  const first = lowerBound(frequencyHz, fromHz);
  for (let i = first; i < frequencyHz.length && frequencyHz[i] <= toHz; i += 1) mask[i] = 1;
}

/** Index of the first entry of an ascending array that isn't below a value. */
export function lowerBound(ascending: Float64Array, value: number): number {
  let low = 0;
  let high = ascending.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (ascending[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/**
 * Decides which points stay out of the mean: automatic spans around spurs unless a person keeps them, the spans
 * that a person excludes, and whatever lies outside the band of interest. `keep` releases each automatic span
 * whose peak it covers.
 * @param frequencyHz ascending frequencies of the points.
 */
export function applyExclusions(
  frequencyHz: Float64Array,
  automatic: AutomaticSpan[],
  requests: ExclusionRequest[],
  band: { fromHz?: number; toHz?: number } = {},
): AppliedExclusions {
  const leftOut = new Uint8Array(frequencyHz.length);
  const kept = requests.filter(({ action }) => action === 'keep');
  const releasing = automatic.map((span) =>
    kept.find(({ fromHz, toHz }) => span.hz >= fromHz && span.hz <= toHz),
  );
  const exclusions: Exclusion[] = automatic.map(({ fromHz, toHz }, index) => {
    const request = releasing[index];
    return {
      fromHz,
      toHz,
      kind: 'automatic',
      active: request === undefined,
      ...(request?.reason === undefined ? {} : { reason: request.reason }),
    };
  });
  for (const { fromHz, toHz, action, reason } of requests) {
    if (action !== 'exclude') continue;
    const span = { fromHz: Math.min(fromHz, toHz), toHz: Math.max(fromHz, toHz) };
    exclusions.push({ ...span, kind: 'person', active: true, ...(reason === undefined ? {} : { reason }) });
  }
  for (const { fromHz, toHz, active } of exclusions) if (active) markSpan(leftOut, frequencyHz, fromHz, toHz);
  if (band.fromHz !== undefined) leftOut.fill(1, 0, lowerBound(frequencyHz, band.fromHz));
  if (band.toHz !== undefined) {
    for (let i = frequencyHz.length - 1; i >= 0 && frequencyHz[i] > band.toHz; i -= 1) leftOut[i] = 1;
  }
  return { leftOut, exclusions, spanLeftOut: releasing.map((request) => request === undefined) };
}
