import { invert, legendre, legendreBasis, multiply } from './floor-polynomial.ts';
import { robustFloor } from './floor.ts';
import type { PointLaw } from './point-law.ts';

const DB_PER_NEPER = 10 / Math.LN10;
const MOST_BINS = 1024;
const SIGNIFICANT_SIGMAS = 3.3;

export interface FloorShapeInput {
  /** Linear power per point. */
  powerMw: Float64Array;
  /** Rising, same length. */
  frequencyHz: Float64Array;
  /** 1 where a point is left out. */
  mask: Uint8Array;
  law: Pick<PointLaw, 'meanPower' | 'relativeVariance' | 'quantilePower'>;
  spacingHz: number;
  filterWidthHz: number;
  /** Points per independent point. */
  tau: number;
}

export interface FloorShape {
  /** The simplest of level, tilt and curve that the scatter allows. `curve` also where the floor has humps. */
  model: 'level' | 'tilt' | 'curve';
  /** Last frequency minus first frequency, dB, from the straight part of the fit of its own model (tilt for a level). */
  tiltDb: number;
  tiltUncertaintyDb: number;
  /** Ends over centre beyond the straight line, dB. */
  curvatureDb: number;
  curvatureUncertaintyDb: number;
  /** True where tilt, curvature or humps stand out of the scatter. */
  flat: boolean;
  /** Highest minus lowest value of the fitted floor, dB. */
  rangeDb: number;
  /** Fitted mean power per point, for residuals. */
  fittedPower: Float64Array;
  /** Free parameters of the fitted floor. */
  parameters: number;
  /** Relative variance of a point about the fit, seen. */
  relativeVariance: number;
}

export interface BinnedPower {
  at: Float64Array;
  meanPower: Float64Array;
  count: Float64Array;
}

/**
 * Shape of the floor on the kept points: mean power by a log link, ln mu = c0 + c1·u + c2·P2(u), u = -1 … 1 across the
 * span, with the Gamma score Σ (p/mu - 1)·x = 0 (so the fit is unbiased in linear power), standard errors from the
 * scatter seen times tau. A term stays where it stands 3.3 standard deviations off zero. Where the robust floor needs
 * shorter blocks than that, its interpolation, scaled to the mean of the kept points, is the fitted floor.
 *
 * @throws RangeError where no point is kept
 */
export function floorShape(input: FloorShapeInput): FloorShape {
  const { powerMw, frequencyHz, mask } = input;
  const bins = binPower(powerMw, frequencyHz, mask);
  const straight = fitLogLink(bins, 1, input);
  const curved = fitLogLink(bins, 2, input);
  const tilted = significant(straight, 1);
  const bent = significant(curved, 2);
  const model = bent ? 'curve' : tilted ? 'tilt' : 'level';
  const fit = bent ? curved : tilted ? straight : fitLogLink(bins, 0, input);
  const local = robustFloor(powerMw, frequencyHz, {
    law: input.law,
    spacingHz: input.spacingHz,
    filterWidthHz: input.filterWidthHz,
    excluded: mask,
    independentFraction: 1 / input.tau,
  });
  const humps = local.blocks > 0 || local.degree > 2;
  const fittedPower = humps
    ? scaleToMean(local.floorPower, powerMw, mask)
    : evaluate(fit.coefficients, frequencyHz);
  const source = bent || humps ? curved : straight;
  let lowest = Infinity;
  let highest = 0;
  for (const power of fittedPower) {
    if (power < lowest) lowest = power;
    if (power > highest) highest = power;
  }
  return {
    model: humps ? 'curve' : model,
    tiltDb: 2 * DB_PER_NEPER * (source.coefficients[1] ?? 0),
    tiltUncertaintyDb: 2 * DB_PER_NEPER * Math.sqrt(source.covariance[1]?.[1] ?? 0),
    curvatureDb: 1.5 * DB_PER_NEPER * (curved.coefficients[2] ?? 0),
    curvatureUncertaintyDb: 1.5 * DB_PER_NEPER * Math.sqrt(curved.covariance[2]?.[2] ?? 0),
    flat: !humps && model === 'level',
    rangeDb: DB_PER_NEPER * Math.log(highest / lowest),
    fittedPower,
    parameters: humps ? Math.max(2 * local.blocks - 1, local.degree + 1) : fit.coefficients.length,
    relativeVariance: relativeVarianceAbout(fittedPower, powerMw, mask),
  };
}

/** Mean power and mean place of the kept points in at most `most` equal runs of points; empty runs are left out. */
export function binPower(
  powerMw: Float64Array,
  frequencyHz: Float64Array,
  mask: Uint8Array,
  most = MOST_BINS,
): BinnedPower {
  const length = powerMw.length;
  const first = frequencyHz[0];
  const span = frequencyHz[length - 1] - first;
  const size = Math.min(most, length);
  const at = new Float64Array(size);
  const meanPower = new Float64Array(size);
  const count = new Float64Array(size);
  let used = 0;
  for (let bin = 0; bin < size; bin++) {
    const end = Math.floor(((bin + 1) * length) / size);
    let place = 0;
    let power = 0;
    let points = 0;
    for (let index = Math.floor((bin * length) / size); index < end; index++) {
      if (mask[index] === 1 || !(powerMw[index] >= 0)) continue;
      place += frequencyHz[index] - first;
      power += powerMw[index];
      points++;
    }
    if (points === 0) continue;
    at[used] = span > 0 ? (2 * place) / points / span - 1 : 0;
    meanPower[used] = power / points;
    count[used] = points;
    used++;
  }
  if (used === 0) throw new RangeError('Every point is left out: the floor has no shape.');
  return {
    at: at.subarray(0, used),
    meanPower: meanPower.subarray(0, used),
    count: count.subarray(0, used),
  };
}

/** Gamma regression with a log link by iterated least squares on binned points. */
export function fitLogLink(
  bins: BinnedPower,
  degree: number,
  scatter: { law: Pick<PointLaw, 'relativeVariance'>; tau: number },
): { coefficients: number[]; covariance: number[][] } {
  const size = Math.min(degree, bins.at.length - 1) + 1;
  const basis = Array.from(bins.at, (place) => legendreBasis(place, size - 1));
  const normal = Array.from({ length: size }, () => new Array<number>(size).fill(0));
  let total = 0;
  let points = 0;
  for (let bin = 0; bin < basis.length; bin++) {
    total += bins.count[bin] * bins.meanPower[bin];
    points += bins.count[bin];
    for (let row = 0; row < size; row++) {
      for (let column = 0; column < size; column++) {
        normal[row][column] += bins.count[bin] * basis[bin][row] * basis[bin][column];
      }
    }
  }
  const inverse = invert(normal);
  const coefficients = new Array<number>(size).fill(0);
  coefficients[0] = Math.log(total / points);
  for (let round = 0; round < 30; round++) {
    const score = new Array<number>(size).fill(0);
    for (let bin = 0; bin < basis.length; bin++) {
      const relative = bins.meanPower[bin] / Math.exp(legendre(coefficients, bins.at[bin])) - 1;
      for (let row = 0; row < size; row++) score[row] += relative * bins.count[bin] * basis[bin][row];
    }
    const step = multiply(inverse, score);
    const damping = 1 / Math.max(1, ...step.map(Math.abs));
    step.forEach((change, row) => (coefficients[row] += damping * change));
    if (step.every((change) => Math.abs(change) < 1e-7)) break;
  }
  const variance = Math.max(scatter.law.relativeVariance, binnedVariance(bins, coefficients, scatter.tau));
  return {
    coefficients,
    covariance: inverse.map((row) => row.map((entry) => entry * variance * scatter.tau)),
  };
}

/** Relative variance of one point that the scatter of the bins about a fit stands for, where bins outlast the correlation. */
function binnedVariance(bins: BinnedPower, coefficients: readonly number[], tau: number): number {
  let sum = 0;
  let used = 0;
  for (let bin = 0; bin < bins.at.length; bin++) {
    const relative = bins.meanPower[bin] / Math.exp(legendre(coefficients, bins.at[bin])) - 1;
    sum += relative * relative * Math.max(1, bins.count[bin] / tau);
    used++;
  }
  return used > coefficients.length ? sum / (used - coefficients.length) : 0;
}

function significant(fit: { coefficients: number[]; covariance: number[][] }, term: number): boolean {
  if (fit.coefficients.length <= term) return false;
  return Math.abs(fit.coefficients[term]) > SIGNIFICANT_SIGMAS * Math.sqrt(fit.covariance[term][term]);
}

function evaluate(coefficients: readonly number[], frequencyHz: Float64Array): Float64Array {
  const first = frequencyHz[0];
  const span = frequencyHz[frequencyHz.length - 1] - first;
  const power = new Float64Array(frequencyHz.length);
  for (let index = 0; index < power.length; index++) {
    const u = span > 0 ? (2 * (frequencyHz[index] - first)) / span - 1 : 0;
    power[index] = Math.exp(legendre(coefficients, u));
  }
  return power;
}

function scaleToMean(floorPower: Float64Array, powerMw: Float64Array, mask: Uint8Array): Float64Array {
  let sum = 0;
  let count = 0;
  for (let index = 0; index < powerMw.length; index++) {
    if (mask[index] === 1 || !(powerMw[index] >= 0)) continue;
    sum += powerMw[index] / floorPower[index];
    count++;
  }
  const scale = count > 0 && sum > 0 ? sum / count : 1;
  return floorPower.map((power) => power * scale);
}

function relativeVarianceAbout(fittedPower: Float64Array, powerMw: Float64Array, mask: Uint8Array): number {
  let sum = 0;
  let count = 0;
  for (let index = 0; index < powerMw.length; index++) {
    if (mask[index] === 1 || !(powerMw[index] >= 0)) continue;
    const relative = powerMw[index] / fittedPower[index] - 1;
    sum += relative * relative;
    count++;
  }
  return count > 1 ? sum / (count - 1) : Number.NaN;
}
