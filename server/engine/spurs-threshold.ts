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
  for (let round = 0; round < 40; round++) {
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
  const nodes = 161;
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
