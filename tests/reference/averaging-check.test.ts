import { describe, expect, test } from 'vitest';
import { checkAveraging, resolveChain } from '../../server/engine/averaging-hypotheses.ts';
import type { ChainSettings } from '../../server/engine/chain.ts';
import { quantizationStepDb, residualsOf } from '../../server/engine/scatter.ts';
import { uniformStream } from '../engine/support/noise.ts';

const POINTS = 1001;

/** Powers of independent points about a floor of 1, each averaged over n exponentials on a scale; rounded in dB. */
function trace(scale: 'power' | 'log' | 'voltage', n: number, seed: number, stepDb = 0.01): Float64Array {
  const uniform = uniformStream(seed);
  return Float64Array.from({ length: POINTS }, () => {
    let sum = 0;
    for (let i = 0; i < n; i += 1) {
      const power = -Math.log(uniform());
      sum += scale === 'power' ? power : scale === 'log' ? Math.log(power) : Math.sqrt(power);
    }
    const mean = sum / n;
    const power = scale === 'power' ? mean : scale === 'log' ? Math.exp(mean) : mean * mean;
    return 10 ** ((Math.round((10 * Math.log10(power)) / stepDb) * stepDb) / 10);
  });
}

const settings = (changes: Partial<ChainSettings>): ChainSettings => ({
  detector: 'sample',
  filterShape: 'gaussian',
  noiseBandwidthHz: 10_645,
  points: POINTS,
  ...changes,
});

function checked(powers: Float64Array, stated: ChainSettings, stepDb: number | null = 0.01) {
  const mean = powers.reduce((sum, power) => sum + power, 0) / powers.length;
  const flat = new Float64Array(powers.length).fill(mean);
  const residuals = residualsOf(powers, flat, new Uint8Array(powers.length), powers.length, 1, stepDb);
  const declared = stated.averagingScale ? resolveChain(stated, stated.averagingScale, residuals) : null;
  return checkAveraging(stated, declared, residuals, () => null);
}

const LEVEL_ERROR_DB = { 5: -1.8539, 20: -2.3324, 100: -2.4713 };

describe('the averaging check on independent points', () => {
  test.each([5, 20, 100] as const)('calls log averaging of %d declared as power averaging so', (n) => {
    for (let seed = 1; seed <= 20; seed += 1) {
      const check = checked(
        trace('log', n, 1000 * n + seed),
        settings({ averagingScale: 'power', sweeps: n }),
      );
      expect([check.verdict, check.fits]).toEqual(['other', 'log']);
      const log = check.likelihoods.find(({ id }) => id === 'log');
      expect(log?.levelErrorDb).toBeCloseTo(LEVEL_ERROR_DB[n], 3);
      expect(check.sentence).toContain(Math.abs(LEVEL_ERROR_DB[n]).toFixed(2));
      expect(check.sentence).not.toContain('!');
    }
  });

  test('finds right declarations as declared, 99 times in 100', () => {
    const wrong: string[] = [];
    const chains = [
      ['power', 5],
      ['power', 20],
      ['power', 100],
      ['log', 5],
      ['log', 20],
      ['log', 100],
    ] as const;
    for (const [scale, n] of chains) {
      for (let seed = 1; seed <= 20; seed += 1) {
        const check = checked(
          trace(scale, n, 2000 * n + seed),
          settings({ averagingScale: scale, sweeps: n }),
        );
        if (check.verdict !== 'declared') wrong.push(`${scale} ${n}: ${check.sentence}`);
        expect(check.fits).not.toBe(scale === 'log' ? 'power' : 'log');
      }
    }
    expect(wrong.length, wrong.join('\n')).toBeLessThanOrEqual(1);
  });

  test('sees a single sweep where twenty are declared', () => {
    const check = checked(trace('power', 1, 5), settings({ averagingScale: 'power', sweeps: 20 }));
    expect([check.verdict, check.fits]).toEqual(['other', 'none']);
  });

  test('leaves a trace whose scale is not stated open, and names the scale that fits', () => {
    const check = checked(trace('log', 20, 6), settings({ sweeps: 20 }));
    expect(check.verdict).toBe('undetermined');
    expect(check.likelihoods.filter(({ fits }) => fits).map(({ id }) => id)).toEqual(['log']);
  });

  test('cannot tell from ten points', () => {
    const powers = trace('log', 20, 7).subarray(0, 10);
    const check = checked(powers, settings({ averagingScale: 'power', sweeps: 20 }));
    expect(check.verdict).toBe('undetermined');
  });

  test('finds no averaging in points that follow no law', () => {
    // Every second point 2 dB up: two heaps.
    const powers = trace('power', 100, 8).map((power, i) => (i % 2 ? power : power * 1.585));
    expect(checked(powers, settings({ averagingScale: 'power', sweeps: 100 })).verdict).toBe('none');
  });

  test('takes rounding to 1 dB out of the scatter', () => {
    const check = checked(trace('power', 20, 9, 1), settings({ averagingScale: 'power', sweeps: 20 }), 1);
    expect(check.verdict).toBe('declared');
    expect(Math.abs((check.observedScatterDb ?? NaN) - 0.9834)).toBeLessThan(0.09);
  });

  test('shows a histogram that holds every point, and curves that hold all probability', () => {
    const check = checked(trace('log', 20, 10), settings({ averagingScale: 'power', sweeps: 20 }));
    const counts = check.histogram?.counts ?? [];
    expect(check.histogram?.edgesDb).toHaveLength(counts.length + 1);
    expect(counts.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 9);
    for (const { atDb, density } of check.curves) {
      const area = density.reduce((sum, value) => sum + value * (atDb[1] - atDb[0]), 0);
      expect(area).toBeCloseTo(1, 2);
    }
  });
});

test.each([
  [1, 1],
  [0.1, 0.1],
  [0.01, 0.01],
])('finds levels rounded to %d dB', (stepDb, found) => {
  const levels = trace('power', 20, 11, stepDb).map((power) => 10 * Math.log10(power));
  expect(quantizationStepDb(levels)).toBe(found);
});

test('finds no step in levels that are not rounded', () => {
  const uniform = uniformStream(12);
  expect(quantizationStepDb(Float64Array.from({ length: 500 }, () => -90 + uniform()))).toBeNull();
});
