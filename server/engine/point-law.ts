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

function lawOf(grid: LogPowerGrid): PointLaw {
  const meanPower = expectation(grid, Math.exp);
  const meanNeper = expectation(grid, (y) => y);
  const variance = expectation(grid, (y) => (y - meanNeper) ** 2);
  const { below, above } = cumulative(grid);
  const { from, step, density } = grid;
  const last = density.length - 1;

  const quantileNeper = (p: number) => {
    const fromBelow = p <= 0.5;
    const [side, target] = fromBelow ? [below, p] : [above, 1 - p];
    let low = 0;
    let high = last;
    while (high - low > 1) {
      const middle = (low + high) >>> 1;
      if (fromBelow ? side[middle] < target : side[middle] > target) low = middle;
      else high = middle;
    }
    const a = side[low];
    const b = side[high];
    const share = a > 0 && b > 0 ? Math.log(target / a) / Math.log(b / a) : (target - a) / (b - a);
    return from + (low + (Number.isFinite(share) ? share : 0.5)) * step;
  };
  const at = (values: Float64Array, y: number) => {
    const place = (y - from) / step;
    if (!(place >= 0)) return values[0];
    if (place >= last) return values[last];
    const low = Math.floor(place);
    return values[low] + (place - low) * (values[low + 1] - values[low]);
  };
  return {
    meanPower,
    biasDb: DB_PER_NEPER * Math.log(meanPower),
    relativeVariance: expectation(grid, (y) => (Math.exp(y) / meanPower - 1) ** 2),
    meanDb: DB_PER_NEPER * meanNeper,
    scatterDb: DB_PER_NEPER * Math.sqrt(variance),
    kurtosis: expectation(grid, (y) => (y - meanNeper) ** 4) / variance ** 2,
    quantilePower: (p) => Math.exp(quantileNeper(p)),
    survivalPower: (power) => at(above, Math.log(power)),
    densityPerDb: (levelDb) => {
      const y = levelDb / DB_PER_NEPER;
      return y < from || y > from + last * step ? 0 : at(density, y) / DB_PER_NEPER;
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
