import gamma from '@stdlib/stats-base-dists-gamma';
import normalQuantile from '@stdlib/stats-base-dists-normal-quantile';
import tQuantile from '@stdlib/stats-base-dists-t-quantile';
import trigamma from '@stdlib/math-base-special-trigamma';

const DB_PER_NEPER = 10 / Math.LN10;

export interface IntervalOptions {
  /** Coverage probability, 0.95 unless said otherwise. */
  coverage?: number;
  /** True where the relative variance was estimated from the same points. */
  varianceFromData?: boolean;
  /** True where the correlation length was estimated from the same points. */
  correlationFromData?: boolean;
}

export interface DensityInterval {
  /** Lower limit of the truth relative to the mean, dB (negative). */
  lowFactorDb: number;
  /** Upper limit of the truth relative to the mean, dB (positive). */
  highFactorDb: number;
  standardUncertaintyDb: number;
  /** Degrees of freedom of the standard uncertainty; Infinity where variance and correlation are known beforehand. */
  degreesOfFreedom: number;
  /** Shape of the Gamma law of the mean that the limits follow, widening included. */
  shape: number;
}

/**
 * Interval of the true power relative to the mean of correlated points.
 *
 * The mean of M independent points of relative variance v follows closely a Gamma of shape a = M/v, so the truth lies in
 * [a/q(1 - (1-c)/2; a), a/q((1-c)/2; a)] times the mean (method, section 6). Where v or the correlation come from the
 * same points, the limits are widened as Student's t is against the normal: shape a·(z/t)², with degrees of freedom
 * nu = 2/(relative variance of the estimated variance of the mean); v contributes (2 + 2v)/M, the correlation 5/M.
 *
 * @param relativeVariance v, variance of one point over its squared mean, > 0
 * @param effectivePoints M, independent points behind the mean, >= 1
 * @throws RangeError where an argument is not positive and finite
 */
export function densityInterval(
  relativeVariance: number,
  effectivePoints: number,
  options: IntervalOptions = {},
): DensityInterval {
  if (!(relativeVariance > 0) || !Number.isFinite(relativeVariance)) {
    throw new RangeError('The relative variance of a point must be a positive number.');
  }
  if (!(effectivePoints > 0) || !Number.isFinite(effectivePoints)) {
    throw new RangeError('The number of effective points must be a positive number.');
  }
  const coverage = options.coverage ?? 0.95;
  const tail = (1 - coverage) / 2;
  const degreesOfFreedom = varianceDegreesOfFreedom(relativeVariance, effectivePoints, options);
  const plainShape = effectivePoints / relativeVariance;
  let shape = plainShape;
  if (Number.isFinite(degreesOfFreedom)) {
    const widening = tQuantile(1 - tail, degreesOfFreedom) / normalQuantile(1 - tail, 0, 1);
    shape = plainShape / (widening * widening);
  }
  return {
    lowFactorDb: DB_PER_NEPER * Math.log(shape / gamma.quantile(1 - tail, shape, 1)),
    highFactorDb: DB_PER_NEPER * Math.log(shape / gamma.quantile(tail, shape, 1)),
    standardUncertaintyDb: DB_PER_NEPER * Math.sqrt(trigamma(plainShape)),
    degreesOfFreedom,
    shape,
  };
}

function varianceDegreesOfFreedom(
  relativeVariance: number,
  effectivePoints: number,
  options: IntervalOptions,
): number {
  let spread = 0;
  if (options.varianceFromData) spread += 2 + 2 * relativeVariance;
  if (options.correlationFromData) spread += 5;
  return spread === 0 ? Infinity : Math.max(1, (2 * effectivePoints) / spread);
}

/**
 * Relative variance of a point from the data: variance over squared mean of the kept points relative to their floor,
 * with the small-sample bias taken out (the mean of tau-correlated points carries variance tau/n of its own, and the
 * ratio to the squared mean is low by v·tau/n).
 *
 * @param relativePower power of each point over the floor there (any common scale)
 * @param mask 1 where a point is left out
 * @param tau points per independent point, >= 1
 * @returns NaN for fewer than two kept points
 */
export function observedRelativeVariance(relativePower: Float64Array, mask: Uint8Array, tau = 1): number {
  let count = 0;
  let sum = 0;
  for (let index = 0; index < relativePower.length; index++) {
    if (mask[index] === 1) continue;
    count++;
    sum += relativePower[index];
  }
  const mean = sum / count;
  let squares = 0;
  for (let index = 0; index < relativePower.length; index++) {
    if (mask[index] === 1) continue;
    const deviation = relativePower[index] - mean;
    squares += deviation * deviation;
  }
  const share = Math.min(0.9, tau / count);
  const variance = squares / (count * (1 - share) * mean * mean);
  return count < 2 ? Number.NaN : variance * (1 + variance * share);
}
