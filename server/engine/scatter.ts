import type { Scale } from '../../shared/settings.ts';
import { pointLaw, type PointLaw, type Stage } from './point-law.ts';

const HISTOGRAM_BINS = 600;
const HISTOGRAM_REACH_SCATTERS = 12;

/** Residuals in dB of the kept points about their fitted floor, as far as the averaging check needs them. */
export interface Residuals {
  /** Number of kept points. */
  points: number;
  /** Points that count as independent for the mean. */
  independentPoints: number;
  /** Points that count as independent for the scatter (`pointsForScatter`). */
  scatterPoints: number;
  /** Standard deviation, the rounding of the file taken out; dB. */
  scatterDb: number;
  /** Fine histogram: counts in equal bins from `fromDb`. */
  fromDb: number;
  binDb: number;
  counts: Float64Array;
}

/**
 * Summarises levels about a floor: standard deviation in dB (with Sheppard's correction q²/12 for a file rounded to
 * steps of q) and a fine histogram.
 * @param powerMw linear powers; @param floorMw fitted mean power, same length; @param leftOut 1 where a point is left out.
 * @param parameters free parameters of the floor, taken off the degrees of freedom.
 */
export function residualsOf(
  powerMw: Float64Array,
  floorMw: Float64Array,
  leftOut: Uint8Array,
  independentPoints: number,
  parameters: number,
  quantizationStepDb: number | null,
): Residuals {
  const levels = new Float64Array(powerMw.length);
  let points = 0;
  let sum = 0;
  for (let i = 0; i < powerMw.length; i += 1) {
    const ratio = powerMw[i] / floorMw[i];
    if (leftOut[i] === 1 || !(ratio > 0)) continue;
    levels[points] = (10 / Math.LN10) * Math.log(ratio);
    sum += levels[points];
    points += 1;
  }
  const mean = sum / points;
  let squares = 0;
  for (let i = 0; i < points; i += 1) squares += (levels[i] - mean) ** 2;
  // Correlated points share their fluctuation with the fitted floor, so each parameter takes off a whole independent point.
  const kept = points * Math.max(0.1, 1 - parameters / Math.max(independentPoints, parameters + 1));
  const variance = squares / Math.max(1, kept) - (quantizationStepDb ?? 0) ** 2 / 12;
  const scatterDb = Math.sqrt(Math.max(variance, 1e-12));
  const fromDb = mean - HISTOGRAM_REACH_SCATTERS * scatterDb;
  const binDb = (2 * HISTOGRAM_REACH_SCATTERS * scatterDb) / HISTOGRAM_BINS;
  const counts = new Float64Array(HISTOGRAM_BINS);
  for (let i = 0; i < points; i += 1) {
    const bin = Math.floor((levels[i] - fromDb) / binDb);
    counts[Math.max(0, Math.min(HISTOGRAM_BINS - 1, bin))] += 1;
  }
  const scatterPoints = pointsForScatter(points, independentPoints);
  return { points, independentPoints, scatterPoints, scatterDb, fromDb, binDb, counts };
}

/**
 * Points that count as independent for a sample variance: squares of correlated values correlate as c², so that
 * τ₂ = 1 + 2·Σ c²(k) takes the place of τ = 1 + 2·Σ c(k). With c a Gaussian of the lag, exp(-s·k²), as behind a
 * resolution filter: s from τ, then τ₂; τ/√2 for long correlation.
 */
export function pointsForScatter(points: number, independentPoints: number): number {
  const tau = points / Math.max(1, independentPoints);
  if (tau <= 1) return points;
  if (tau > 3) return (points * Math.SQRT2) / tau;
  const tauAt = (s: number) => {
    let sum = 1;
    for (let lag = 1; s * lag * lag < 30; lag += 1) sum += 2 * Math.exp(-s * lag * lag);
    return sum;
  };
  return points / tauAt(2 * solveFalling(tauAt, tau, 0.1, 30));
}

/**
 * Standard uncertainty of an observed scatter whose points follow a law, relative: √((κ-1)/(4·M)),
 * from the variance of a sample variance of M independent values of kurtosis κ.
 */
export function relativeScatterUncertainty(
  law: Pick<PointLaw, 'kurtosis'>,
  independentPoints: number,
): number {
  return Math.sqrt((law.kurtosis - 1) / (4 * Math.max(2, independentPoints)));
}

/** Finds x between two positive limits where a falling function reaches a target, by bisection on a log axis. */
export function solveFalling(f: (x: number) => number, target: number, from: number, to: number): number {
  if (f(from) <= target) return from;
  if (f(to) >= target) return to;
  let low = Math.log(from);
  let high = Math.log(to);
  for (let i = 0; i < 22; i += 1) {
    const middle = (low + high) / 2;
    if (f(Math.exp(middle)) > target) low = middle;
    else high = middle;
  }
  return Math.exp((low + high) / 2);
}

const MOST_AVERAGES = 1e6;

/** How many sweeps, averaged on a scale after the given stages, show a scatter: at least 1, not always whole. */
export function sweepsSeen(before: Stage[], scale: Scale, scatterDb: number): number {
  const single = pointLaw(before);
  if (scale === 'log') return Math.max(1, (single.scatterDb / scatterDb) ** 2);
  const scatterOf = (values: number) => pointLaw([...before, { place: 'sweeps', scale, values }]).scatterDb;
  return solveFalling(scatterOf, scatterDb, 1, MOST_AVERAGES);
}

/** How many values a detector averaged before the given later stages, from the scatter: at least 1. */
export function detectorValuesSeen(scale: Scale, after: Stage[], scatterDb: number): number {
  const scatterOf = (values: number) => pointLaw([{ place: 'detector', scale, values }, ...after]).scatterDb;
  return solveFalling(scatterOf, scatterDb, 1, MOST_AVERAGES);
}

/**
 * Step to which levels are rounded: 0.001, 0.01, 0.05, 0.1, 0.25, 0.5 or 1 dB where all of up to 2,000 levels lie on it; else null.
 */
export function quantizationStepDb(levelDb: Float64Array): number | null {
  const stride = Math.max(1, Math.floor(levelDb.length / 2000));
  const onStep = (step: number) => {
    for (let i = 0; i < levelDb.length; i += stride) {
      const steps = levelDb[i] / step;
      if (Math.abs(steps - Math.round(steps)) > 1e-6 * Math.max(1, Math.abs(steps)) * 1e-3 + 1e-7)
        return false;
    }
    return true;
  };
  return [1, 0.5, 0.25, 0.1, 0.05, 0.01, 0.001].find(onStep) ?? null;
}
