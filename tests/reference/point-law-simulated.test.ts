import { describe, expect, test } from 'vitest';
import { pointLaw, type Stage } from '../../server/engine/point-law.ts';
import { db, stage } from './laws.ts';

const POINTS = 40_000;

/** A seeded stream of uniform numbers between 0 and 1: Marsaglia's xorshift, 32 bits. */
function uniformStream(seed: number): () => number {
  let state = seed;
  return () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return ((state >>> 0) + 0.5) / 4294967296;
  };
}

/** One point by the letter of its chain: the last stage collects the results of those before it. */
function simulatedPoint(stages: Stage[], uniform: () => number): number {
  const last = stages.at(-1);
  if (!last) return -Math.log(uniform());
  const before = stages.slice(0, -1);
  const inputs = Array.from({ length: last.values }, () => simulatedPoint(before, uniform));
  const mean = (on: (power: number) => number) =>
    inputs.reduce((sum, power) => sum + on(power), 0) / inputs.length;
  switch (last.scale) {
    case 'power':
      return mean((power) => power);
    case 'log':
      return Math.exp(mean(Math.log));
    case 'voltage':
      return mean(Math.sqrt) ** 2;
    case 'largest':
      return Math.max(...inputs);
    case 'smallest':
      return Math.min(...inputs);
  }
}

/** Chains with, in parts of the scatter, how far law and simulation may differ beyond chance. */
const CHAINS: { name: string; stages: Stage[]; own: number }[] = [
  { name: 'one value', stages: [], own: 0 },
  { name: 'power 5', stages: [stage('power', 5)], own: 0 },
  { name: 'log 2', stages: [stage('log', 2)], own: 0 },
  { name: 'log 10', stages: [stage('log', 10)], own: 0 },
  { name: 'voltage 3', stages: [stage('voltage', 3)], own: 0.02 },
  { name: 'voltage 12', stages: [stage('voltage', 12)], own: 0.01 },
  { name: 'power 3, log 4', stages: [stage('power', 3), stage('log', 4)], own: 0 },
  { name: 'power 3, voltage 4', stages: [stage('power', 3), stage('voltage', 4)], own: 0.01 },
  { name: 'log 3, power 4', stages: [stage('log', 3), stage('power', 4)], own: 0.03 },
  { name: 'voltage 3, log 4', stages: [stage('voltage', 3), stage('log', 4)], own: 0.02 },
  { name: 'largest of 8', stages: [stage('largest', 8)], own: 0 },
  { name: 'smallest of 4', stages: [stage('smallest', 4)], own: 0 },
  { name: 'largest of 5, log 4', stages: [stage('largest', 5), stage('log', 4)], own: 0 },
  { name: 'largest of 5, power 4', stages: [stage('largest', 5), stage('power', 4)], own: 0.03 },
];

describe('the law of a point against plain sums of exponentials', () => {
  test.each(CHAINS)('$name', ({ stages, own }) => {
    const law = pointLaw(stages);
    const uniform = uniformStream(20_260 + stages.reduce((sum, { values }) => 31 * sum + values, 7));
    const powers = Float64Array.from({ length: POINTS }, () => simulatedPoint(stages, uniform)).sort();
    const root = Math.sqrt(POINTS);

    const mean = powers.reduce((sum, power) => sum + power, 0) / POINTS;
    const meanError = (law.meanPower * Math.sqrt(law.relativeVariance)) / root;
    expect(Math.abs(mean - law.meanPower)).toBeLessThan(4 * meanError);
    const squares = powers.reduce((sum, power) => sum + (power / mean - 1) ** 2, 0) / POINTS;
    expect(Math.abs(squares / law.relativeVariance - 1)).toBeLessThan(0.06);

    const levels = powers.map(db);
    const meanDb = levels.reduce((sum, level) => sum + level, 0) / POINTS;
    const scatterDb = Math.sqrt(levels.reduce((sum, level) => sum + (level - meanDb) ** 2, 0) / POINTS);
    const scatterError = law.scatterDb * (own + (4 * Math.sqrt((law.kurtosis - 1) / 4)) / root);
    expect(Math.abs(meanDb - law.meanDb)).toBeLessThan(law.scatterDb * (own + 4 / root));
    expect(Math.abs(scatterDb - law.scatterDb)).toBeLessThan(scatterError);

    for (const p of [0.05, 0.25, 0.5, 0.75, 0.95, 0.995]) {
      const below = powers.findIndex((power) => power > law.quantilePower(p)) / POINTS;
      expect(Math.abs(below - p), `quantile ${p}`).toBeLessThan(own + (4 * Math.sqrt(p * (1 - p))) / root);
      expect(law.survivalPower(law.quantilePower(p))).toBeCloseTo(1 - p, 3);
    }
  });

  test('a density in dB holds all points, and its mean and scatter are those of the law', () => {
    for (const { stages } of CHAINS) {
      const law = pointLaw(stages);
      const step = law.scatterDb / 200;
      let total = 0;
      let first = 0;
      let second = 0;
      for (
        let level = law.meanDb - 25 * law.scatterDb;
        level < law.meanDb + 12 * law.scatterDb;
        level += step
      ) {
        const share = law.densityPerDb(level) * step;
        total += share;
        first += share * level;
        second += share * level * level;
      }
      expect(total).toBeCloseTo(1, 4);
      expect(Math.abs(first - law.meanDb)).toBeLessThan(1e-3 * law.scatterDb);
      expect(Math.abs(Math.sqrt(second - first * first) / law.scatterDb - 1)).toBeLessThan(1e-3);
    }
  });
});
