import normalQuantile from '@stdlib/stats-base-dists-normal-quantile';
import type { PointLaw } from './point-law.ts';

/**
 * Factor over the estimated floor that a point of noise alone exceeds with a given probability, the floor itself being
 * estimated from so many independent cells.
 *
 * The floor's estimate is taken as a Gamma of shape K = cells/v about the truth (v: relative variance of a point), so
 * P(x > T·f) = ∫ g(y)·S(T·e^y) dy with g the density of its log; T by bisection. For single looks this is the
 * cell-averaging threshold: T = cells·(p^(-1/cells) - 1).
 *
 * @param law law of a displayed point; S is its survival function
 * @param probability of one point, 0 < p < 0.5
 * @param cells independent points behind the floor; Infinity: the floor is known
 */
export function thresholdFactor(
  law: Pick<PointLaw, 'meanPower' | 'relativeVariance' | 'survivalPower'>,
  probability: number,
  cells: number,
): number {
  const { shifts, weights } = floorSpread(law.relativeVariance, cells);
  const exceedance = (factor: number) => {
    let sum = 0;
    for (let node = 0; node < shifts.length; node++) {
      sum += weights[node] * law.survivalPower(law.meanPower * factor * shifts[node]);
    }
    return sum;
  };
  let low = 1;
  let high = 2;
  while (exceedance(high) > probability && high < 1e12) {
    low = high;
    high *= 2;
  }
  for (let round = 0; round < 30; round++) {
    const middle = Math.sqrt(low * high);
    if (exceedance(middle) > probability) low = middle;
    else high = middle;
  }
  return high;
}

/** Estimated floor over the true one at equal steps of its log, and their shares. */
function floorSpread(relativeVariance: number, cells: number) {
  if (!Number.isFinite(cells)) return { shifts: [1], weights: [1] };
  const shape = Math.max(0.5, cells / relativeVariance);
  const deviation = 1 / Math.sqrt(shape);
  const from = -9 * deviation - 12 / shape;
  const to = 6 * deviation;
  const nodes = 81;
  const shifts: number[] = [];
  const weights: number[] = [];
  let total = 0;
  for (let node = 0; node < nodes; node++) {
    const log = from + ((to - from) * node) / (nodes - 1);
    const density = Math.exp(shape * (log + 1 - Math.exp(log)));
    shifts.push(Math.exp(log));
    weights.push(density);
    total += density;
  }
  return { shifts, weights: weights.map((weight) => weight / total) };
}

/**
 * Factor by which a one-pole video filter's tail lies above that of the law with the same effective number of values.
 *
 * Its weights fall off exponentially, so its skewness is 4/3 of that of equal weights. With z the normal quantile of the
 * probability: ln factor = (0.005 + 0.026·(1 - v))·√v·(z² - 1), an upper line over simulated sweeps of 600,000 points with VBW/RBW
 * from 0.03 to 3 on the power, log and voltage scales, at probabilities from 0.01 to 3·10⁻⁵.
 */
export function videoTailFactor(relativeVariance: number, probability: number): number {
  const z = normalQuantile(1 - probability, 0, 1);
  const share = Math.max(0, 1 - relativeVariance);
  return Math.exp((0.005 + 0.026 * share) * Math.sqrt(relativeVariance) * Math.max(0, z * z - 1));
}

/**
 * Threshold per point, between factors computed for five numbers of cells: the factor's log is smooth in 1/cells.
 *
 * @param floorPower mean power per point
 * @param cellsAt independent points behind the floor at places that part the span evenly
 * @param factorFor factor for a number of cells
 */
export function thresholds(
  floorPower: Float64Array,
  frequencyHz: Float64Array,
  cellsAt: Float64Array,
  factorFor: (cells: number) => number,
): Float64Array {
  const inverse = Array.from(cellsAt, (cells) => 1 / cells);
  const least = Math.min(...inverse);
  const most = Math.max(...inverse);
  const steps = most > least * 1.001 ? 4 : 0;
  const atStep = Array.from({ length: steps + 1 }, (_, step) => {
    const share = steps === 0 ? 0 : step / steps;
    return Math.log(factorFor(1 / (least + share * share * (most - least))));
  });
  const nodes = inverse.map((entry) => {
    if (steps === 0) return Math.exp(atStep[0]);
    const place = steps * Math.sqrt((entry - least) / (most - least));
    const step = Math.min(steps - 1, Math.floor(place));
    return Math.exp(atStep[step] + (place - step) * (atStep[step + 1] - atStep[step]));
  });
  nodes.push(nodes[nodes.length - 1]);
  const first = frequencyHz[0];
  const span = frequencyHz[frequencyHz.length - 1] - first;
  const scale = span > 0 ? (cellsAt.length - 1) / span : 0;
  const power = new Float64Array(floorPower.length);
  for (let index = 0; index < power.length; index++) {
    const place = (frequencyHz[index] - first) * scale;
    const node = Math.floor(place);
    power[index] = floorPower[index] * (nodes[node] + (place - node) * (nodes[node + 1] - nodes[node]));
  }
  return power;
}
