import type { Scale } from '../../shared/settings.ts';
import {
  cumulative,
  expectation,
  extreme,
  gammaGrid,
  logMean,
  powerMean,
  voltageMean,
  type LogPowerGrid,
} from './log-power-grid.ts';
import { DB_PER_NEPER } from './units.ts';

/** One place where values are averaged on a scale, or where the largest or smallest of them is kept. */
export interface Stage {
  place: 'detector' | 'video' | 'sweeps';
  scale: Scale | 'largest' | 'smallest';
  /** Independent values, >= 1, not always whole. */
  values: number;
}

/** Distribution of one displayed point of noise whose true mean power is 1. */
export interface PointLaw {
  /** Mean of the displayed linear power. */
  meanPower: number;
  /** 10·log10 of `meanPower`: what the linear mean of a trace reads too high (negative: too low). */
  biasDb: number;
  /** Variance of the displayed linear power over its squared mean. */
  relativeVariance: number;
  /** Mean of the levels in dB. */
  meanDb: number;
  /** Standard deviation of the levels in dB. */
  scatterDb: number;
  /** Fourth central moment of the levels over the squared variance; 3 for a normal law. */
  kurtosis: number;
  /** Linear power below which a share p of the points lies. */
  quantilePower(p: number): number;
  /** Share of the points above a linear power. */
  survivalPower(power: number): number;
  /** Probability density of the level in dB, per dB. */
  densityPerDb(levelDb: number): number;
}

function throughStage(grid: LogPowerGrid, { scale, values }: Stage): LogPowerGrid {
  if (values <= 1.0001) return grid;
  switch (scale) {
    case 'power':
      return powerMean(grid, values);
    case 'log':
      return logMean(grid, values);
    case 'voltage':
      return voltageMean(grid, values);
    case 'largest':
    case 'smallest':
      return extreme(grid, values, scale);
  }
}

/** Share of the points below (sign 1) or above (sign -1) each place of a grid, with the density there. */
interface Tail {
  share: Float64Array;
  density: Float64Array;
  sign: 1 | -1;
}

/** Share between two places: the cubic in its logarithm that meets value and slope at both; linear where a share is 0. */
function shareAt({ share, density, sign }: Tail, step: number, place: number): number {
  const low = Math.min(Math.floor(place), share.length - 2);
  const t = place - low;
  const a = share[low];
  const b = share[low + 1];
  if (!(a > 0 && b > 0)) return a + t * (b - a);
  const slopeA = (sign * density[low] * step) / a;
  const slopeB = (sign * density[low + 1] * step) / b;
  const along = t * t * (3 - 2 * t) * Math.log(b / a);
  return a * Math.exp(along + t * (1 - t) * ((1 - t) * slopeA - t * slopeB));
}

function lawOf(grid: LogPowerGrid): PointLaw {
  const meanPower = expectation(grid, Math.exp);
  const meanNeper = expectation(grid, (y) => y);
  const variance = expectation(grid, (y) => (y - meanNeper) ** 2);
  const { below, above } = cumulative(grid);
  const { from, step, density } = grid;
  const last = density.length - 1;

  const lower: Tail = { share: below, density, sign: 1 };
  const upper: Tail = { share: above, density, sign: -1 };

  const quantileNeper = (p: number) => {
    const [tail, target] = p <= 0.5 ? [lower, p] : [upper, 1 - p];
    let low = 0;
    let high = last;
    while (high - low > 1e-9) {
      const middle = high - low > 1 ? (low + high) >>> 1 : (low + high) / 2;
      const seen = shareAt(tail, step, middle);
      if (tail.sign === 1 ? seen < target : seen > target) low = middle;
      else high = middle;
    }
    return from + ((low + high) / 2) * step;
  };
  return {
    meanPower,
    biasDb: DB_PER_NEPER * Math.log(meanPower),
    relativeVariance: expectation(grid, (y) => (Math.exp(y) / meanPower - 1) ** 2),
    meanDb: DB_PER_NEPER * meanNeper,
    scatterDb: DB_PER_NEPER * Math.sqrt(variance),
    kurtosis: expectation(grid, (y) => (y - meanNeper) ** 4) / variance ** 2,
    quantilePower: (p) => Math.exp(quantileNeper(p)),
    survivalPower: (power) => {
      const place = (Math.log(power) - from) / step;
      if (!(place > 0)) return 1;
      return place >= last ? 0 : shareAt(upper, step, place);
    },
    densityPerDb: (levelDb) => {
      const place = (levelDb / DB_PER_NEPER - from) / step;
      if (!(place >= 0 && place < last)) return 0;
      const low = Math.floor(place);
      return (density[low] + (place - low) * (density[low + 1] - density[low])) / DB_PER_NEPER;
    },
  };
}

const known = new Map<string, PointLaw>();
const MOST_KNOWN = 256;

/**
 * Law of one displayed point of Gaussian noise after any chain of stages, from the exponential law of one value.
 * Exact for power, log and peak stages in any order that starts with them; a power stage after a log stage and every
 * voltage stage keep the exact mean and variance (method, section 2). Laws are kept by their stages: a pure memory.
 */
export function pointLaw(stages: Stage[]): PointLaw {
  const key = stages.map(({ scale, values }) => `${scale}:${values}`).join(' ');
  const earlier = known.get(key);
  if (earlier) return earlier;
  const law = lawOf(stages.reduce(throughStage, gammaGrid(1)));
  if (known.size >= MOST_KNOWN) known.clear();
  known.set(key, law);
  return law;
}
