import type { Points } from '../../../../shared/capture.ts';
import type { Exclusion } from '../../../../shared/estimate.ts';

/** Three columns for the plot: frequency, level of points in the mean, level of points left out (null elsewhere). */
export type PlotData = [number[], (number | null)[], (number | null)[]];

/** Active exclusions as rising, disjoint spans. */
export function mergedSpans(
  exclusions: readonly Exclusion[],
): { fromHz: number; toHz: number; byHand: boolean }[] {
  const spans = exclusions
    .filter(({ active }) => active)
    .map(({ fromHz, toHz, kind }) => ({ fromHz, toHz, byHand: kind === 'person' }))
    .sort((a, b) => a.fromHz - b.fromHz);
  const merged: typeof spans = [];
  for (const span of spans) {
    const last = merged.at(-1);
    if (last && span.fromHz <= last.toHz) last.toHz = Math.max(last.toHz, span.toHz);
    else merged.push({ ...span });
  }
  return merged;
}

/** Points parted into those in the mean and those left out; a bucket stands as its lowest and highest level. */
export function plotData(points: Points, exclusions: readonly Exclusion[]): PlotData {
  const spans = mergedSpans(exclusions);
  const hz: number[] = [];
  const used: (number | null)[] = [];
  const out: (number | null)[] = [];
  let place = 0;
  const put = (atHz: number, level: number) => {
    while (place < spans.length && spans[place].toHz < atHz) place += 1;
    const left = place < spans.length && spans[place].fromHz <= atHz;
    hz.push(atHz);
    used.push(left ? null : level);
    out.push(left ? level : null);
    if (hz.length > 1 && left !== (out[hz.length - 2] !== null)) {
      if (left) out[hz.length - 2] = used[hz.length - 2];
      else used[hz.length - 2] = out[hz.length - 2];
    }
  };
  if (points.form === 'exact') points.hz.forEach((atHz, i) => put(atHz, points.level[i]));
  else
    points.hz.forEach((atHz, i) => {
      put(atHz, i % 2 === 0 ? points.min[i] : points.max[i]);
      put(atHz, i % 2 === 0 ? points.max[i] : points.min[i]);
    });
  return [hz, used, out];
}

/** Number of points of an evenly spaced axis between two frequencies. */
export function pointsBetween(
  fromHz: number,
  toHz: number,
  axis: { firstHz: number; lastHz: number; spacingHz: number },
): number {
  if (!(axis.spacingHz > 0)) return 0;
  const first = Math.max(0, Math.ceil((fromHz - axis.firstHz) / axis.spacingHz - 1e-6));
  const last = Math.floor((Math.min(toHz, axis.lastHz) - axis.firstHz) / axis.spacingHz + 1e-6);
  return Math.max(0, last - first + 1);
}
