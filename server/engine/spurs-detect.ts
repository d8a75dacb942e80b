import type { Skirt } from './spurs-guard.ts';

/** Dip between two peaks of one cluster that makes them two spurs, dB. */
const DIP_DB = 5;
/** Guards end where the leak falls this far below the floor; nearer where too few points would be left. */
const GUARD_DB = [-17, -8, 0];
const FEWEST_KEPT = 0.15;
const GUARD_MARGIN = 1.1;

export interface DetectionInput {
  powerMw: Float64Array;
  frequencyHz: Float64Array;
  floorPower: Float64Array;
  /** Per point: what its power must exceed to stand out. */
  thresholdPower: Float64Array;
  excluded: Uint8Array;
  skirt: Skirt;
  filterWidthHz: number;
  spacingHz: number;
}

export interface Peak {
  index: number;
  /** First and last point of the span left out around it. */
  from: number;
  to: number;
  /** First and last exceeding point. */
  firstExceeding: number;
  lastExceeding: number;
}

export interface Detection {
  /** By rising frequency. */
  peaks: Peak[];
  mask: Uint8Array;
}

/**
 * Exceedances of the threshold gathered into spurs, with the points that their skirts reach.
 *
 * Exceedances nearer than one and a half filter widths are one spur, unless two peaks at least a filter width apart
 * have a dip of 5 dB between them. A peak that the skirt of a stronger one and noise at the threshold can explain
 * together (amplitudes added) is part of that one.
 */
export function detect(input: DetectionInput): Detection {
  const candidates = gather(input);
  if (candidates.length === 0) return { peaks: [], mask: new Uint8Array(input.powerMw.length) };
  let detection: Detection = { peaks: [], mask: new Uint8Array(0) };
  for (const guardDb of GUARD_DB) {
    detection = guard(input, candidates, guardDb);
    let kept = 0;
    for (let index = 0; index < detection.mask.length; index++) {
      if ((detection.mask[index] | input.excluded[index]) === 0) kept++;
    }
    if (kept >= FEWEST_KEPT * detection.mask.length) break;
  }
  return detection;
}

/** Clusters of exceedances, split at deep dips. */
function gather(input: DetectionInput): Peak[] {
  const { powerMw, frequencyHz, thresholdPower, excluded, filterWidthHz } = input;
  const gapHz = 1.5 * filterWidthHz;
  const clusters: Peak[] = [];
  let first = -1;
  let last = -1;
  let peak = -1;
  const close = () => {
    if (first >= 0)
      clusters.push({ index: peak, from: first, to: last, firstExceeding: first, lastExceeding: last });
  };
  for (let index = 0; index < powerMw.length; index++) {
    if (!(powerMw[index] > thresholdPower[index]) || excluded[index] === 1) continue;
    if (first < 0 || (index - last > 1 && frequencyHz[index] - frequencyHz[last] > gapHz)) {
      close();
      first = index;
      peak = index;
    }
    last = index;
    if (powerMw[index] > powerMw[peak]) peak = index;
  }
  close();
  return clusters.flatMap((cluster) => split(input, cluster));
}

/** Zigzag over a cluster: a new peak begins after a fall and a rise of 5 dB each. */
function split(input: DetectionInput, cluster: Peak): Peak[] {
  const { powerMw, frequencyHz, filterWidthHz } = input;
  const { firstExceeding: first, lastExceeding: last } = cluster;
  if (frequencyHz[last] - frequencyHz[first] < filterWidthHz) return [cluster];
  const ratio = 10 ** (DIP_DB / 10);
  const tops: number[] = [];
  const dips: number[] = [];
  let top = first;
  let dip = first;
  let falling = false;
  for (let index = first; index <= last; index++) {
    if (!falling) {
      if (powerMw[index] > powerMw[top]) top = index;
      if (powerMw[index] * ratio < powerMw[top]) {
        tops.push(top);
        dip = index;
        falling = true;
      }
    } else {
      if (powerMw[index] < powerMw[dip]) dip = index;
      if (powerMw[index] > powerMw[dip] * ratio && powerMw[index] > input.thresholdPower[index]) {
        dips.push(dip);
        top = index;
        falling = false;
      }
    }
  }
  if (!falling) tops.push(top);
  const resolved: number[] = [];
  const borders: number[] = [];
  tops.forEach((place, order) => {
    const previous = resolved.length - 1;
    if (previous >= 0 && frequencyHz[place] - frequencyHz[resolved[previous]] < filterWidthHz) {
      if (powerMw[place] > powerMw[resolved[previous]]) resolved[previous] = place;
      return;
    }
    if (previous >= 0) borders.push(dips[order - 1]);
    resolved.push(place);
  });
  const meanGapHz = (frequencyHz[last] - frequencyHz[first]) / resolved.length;
  if (resolved.length < 2 || (resolved.length >= 4 && meanGapHz < 2.5 * filterWidthHz)) return [cluster];
  return resolved.map((place, order) => {
    const from = order === 0 ? first : borders[order - 1] + 1;
    const to = order === resolved.length - 1 ? last : borders[order];
    return { index: place, from, to, firstExceeding: from, lastExceeding: to };
  });
}

function guard(input: DetectionInput, candidates: Peak[], guardDb: number): Detection {
  const { powerMw, frequencyHz, floorPower, thresholdPower, skirt } = input;
  const length = powerMw.length;
  const mask = new Uint8Array(length);
  const leak = new Float64Array(length);
  const mostPoints = Math.max(1, Math.floor(length / 8));
  const limit = 10 ** (guardDb / 10);
  const accepted: Peak[] = [];

  const reachHz = (index: number) =>
    GUARD_MARGIN * skirt.radiusHz(guardDb - 10 * Math.log10(powerMw[index] / floorPower[index]));
  const paint = (centre: number) => {
    const radiusHz = reachHz(centre);
    for (const step of [-1, 1]) {
      let index = centre + (step === 1 ? 0 : -1);
      for (let count = 0; count < mostPoints && index >= 0 && index < length; count++, index += step) {
        const offsetHz = Math.abs(frequencyHz[index] - frequencyHz[centre]);
        if (offsetHz > radiusHz) break;
        leak[index] += powerMw[centre] * skirt.leakAt(offsetHz / GUARD_MARGIN);
        if (leak[index] > limit * floorPower[index]) mask[index] = 1;
      }
    }
  };
  const explained = (index: number) =>
    Math.sqrt(powerMw[index]) <= Math.sqrt(leak[index]) + Math.sqrt(thresholdPower[index]);

  const byStrength = [...candidates].sort((one, other) => powerMw[other.index] - powerMw[one.index]);
  for (const candidate of byStrength) {
    const { index, firstExceeding, lastExceeding } = candidate;
    for (let place = firstExceeding; place <= lastExceeding; place++) mask[place] = 1;
    if (leak[index] > 0 && explained(index)) continue;
    accepted.push({ ...candidate });
    paint(index);
    if (!explained(firstExceeding))
      shade(input, mask, firstExceeding, -1, reachHz(firstExceeding), mostPoints);
    if (!explained(lastExceeding)) shade(input, mask, lastExceeding, 1, reachHz(lastExceeding), mostPoints);
  }
  accepted.sort((one, other) => one.index - other.index);
  extend(accepted, mask);
  return { peaks: accepted, mask };
}

/** Leaves out points outward from the edge of a spur that is wider than the filter. */
function shade(
  input: DetectionInput,
  mask: Uint8Array,
  edge: number,
  step: -1 | 1,
  radiusHz: number,
  mostPoints: number,
): void {
  const { frequencyHz } = input;
  let index = edge;
  for (let count = 0; count < mostPoints && index >= 0 && index < mask.length; count++, index += step) {
    if (Math.abs(frequencyHz[index] - frequencyHz[edge]) > radiusHz) break;
    mask[index] = 1;
  }
}

/** The span of each spur: out to the end of the masked run, or half way to its neighbour in the same run. */
function extend(peaks: Peak[], mask: Uint8Array): void {
  peaks.forEach((peak, order) => {
    const before = order === 0 ? -1 : peaks[order - 1].to;
    let from = peak.from;
    while (from - 1 > before && from > 0 && mask[from - 1] === 1) from--;
    peak.from = Math.max(from, before + 1);
    const next = order + 1 < peaks.length ? peaks[order + 1] : null;
    let end = mask.length;
    if (next !== null) {
      let gap = peak.index;
      while (gap < next.index && mask[gap] === 1) gap++;
      if (gap === next.index)
        end = Math.max(peak.lastExceeding + 1, (peak.lastExceeding + next.firstExceeding + 1) >> 1);
    }
    let to = peak.lastExceeding;
    while (to + 1 < end && mask[to + 1] === 1) to++;
    peak.to = to;
  });
}
