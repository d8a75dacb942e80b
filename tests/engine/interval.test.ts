import { describe, expect, it } from 'vitest';
import { effectiveIndependentPoints } from '../../server/engine/correlation.ts';
import { densityInterval, observedRelativeVariance } from '../../server/engine/interval.ts';
import { pointLaw } from '../../server/engine/point-law.ts';
import { simulateCapture, uniformStream, type Scale } from './support/noise.ts';

describe('the interval of a density', () => {
  it.each([
    // Reference section 4, table of 95 % limits: nu = 2 x averages (chi-square, computed there).
    [1, -5.669, 15.966],
    [5, -3.114, 4.885],
    [50, -1.125, 1.295],
    [500, -0.372, 0.389],
  ])('has the chi-square limits for %d independent single looks', (points, lowDb, highDb) => {
    const interval = densityInterval(1, points);
    expect(interval.lowFactorDb).toBeCloseTo(lowDb, 2);
    expect(interval.highFactorDb).toBeCloseTo(highDb, 2);
    expect(interval.degreesOfFreedom).toBe(Infinity);
  });

  it('widens where variance and correlation come from the same points', () => {
    const known = densityInterval(1, 40);
    const estimated = densityInterval(1, 40, { varianceFromData: true, correlationFromData: true });
    expect(estimated.highFactorDb).toBeGreaterThan(known.highFactorDb * 1.1);
    expect(estimated.degreesOfFreedom).toBeLessThan(20);
    expect(estimated.standardUncertaintyDb).toBe(known.standardUncertaintyDb);
  });

  it('refuses a variance or a number of points that is not positive', () => {
    expect(() => densityInterval(0, 10)).toThrow(RangeError);
    expect(() => densityInterval(1, 0)).toThrow(RangeError);
    expect(() => densityInterval(Number.NaN, 10)).toThrow(RangeError);
  });

  const cases: { name: string; length: number; spacing: number; sweeps: number; scale: Scale }[] = [
    { name: '201 single looks, 0.3 RBW apart', length: 201, spacing: 0.3, sweeps: 1, scale: 'power' },
    {
      name: '401 points of 10 log sweeps, 0.5 RBW apart',
      length: 401,
      spacing: 0.5,
      sweeps: 10,
      scale: 'log',
    },
    { name: '101 points of 5 power sweeps, 2 RBW apart', length: 101, spacing: 2, sweeps: 5, scale: 'power' },
    { name: '31 single looks, 1 RBW apart', length: 31, spacing: 1, sweeps: 1, scale: 'power' },
  ];
  it.each(cases)(
    'covers the truth 93 to 97 times in a hundred: $name',
    ({ length, spacing, sweeps, scale }) => {
      const law = pointLaw([{ place: 'sweeps', scale, values: sweeps }]);
      const captures = 1500;
      let covered = 0;
      for (let seed = 1; seed <= captures; seed++) {
        const powerMw = simulateCapture(
          { length, spacingPerWidth: spacing, sweeps, scale },
          uniformStream(seed * 271),
        );
        const mask = new Uint8Array(length);
        const mean = powerMw.reduce((sum, power) => sum + power, 0) / length;
        const residual = powerMw.map((power) => power / mean - 1);
        const correlation = effectiveIndependentPoints(residual, mask, {
          spacingHz: spacing,
          filterWidthHz: 1,
        });
        const fromData = correlation.effectivePoints >= 20;
        const variance = fromData
          ? observedRelativeVariance(powerMw, mask, correlation.tau)
          : law.relativeVariance;
        const interval = densityInterval(variance, correlation.effectivePoints, {
          varianceFromData: fromData,
          correlationFromData: correlation.source === 'data',
        });
        const truthDb = 10 * Math.log10(law.meanPower / mean);
        if (truthDb >= interval.lowFactorDb && truthDb <= interval.highFactorDb) covered++;
      }
      expect(covered / captures).toBeGreaterThan(0.93);
      expect(covered / captures).toBeLessThan(0.97);
    },
    30_000,
  );
});

describe('the relative variance seen', () => {
  it('is unbiased for few correlated points', () => {
    let sum = 0;
    for (let seed = 1; seed <= 400; seed++) {
      const powerMw = simulateCapture(
        { length: 101, spacingPerWidth: 0.5, sweeps: 4, scale: 'power' },
        uniformStream(seed * 41),
      );
      sum += observedRelativeVariance(powerMw, new Uint8Array(101), 3.01) / 400;
    }
    expect(Math.abs(sum - 0.25)).toBeLessThan(0.008);
  });
});
