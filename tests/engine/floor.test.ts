import { describe, expect, it } from 'vitest';
import { floorShape } from '../../server/engine/floor-shape.ts';
import { sampleQuantile } from '../../server/engine/floor-quantile.ts';
import { robustFloor } from '../../server/engine/floor.ts';
import { pointLaw } from '../../server/engine/point-law.ts';
import { findRipple } from '../../server/engine/ripple.ts';
import { axis, simulateCapture, uniformStream, type CaptureSpec } from './support/noise.ts';

const single = pointLaw([]);

function lawOf(sweeps: number) {
  return pointLaw([{ place: 'sweeps', scale: 'power', values: sweeps }]);
}

function capture(spec: Partial<CaptureSpec> & { length: number }, seed: number) {
  const full: CaptureSpec = { spacingPerWidth: 0.5, sweeps: 1, scale: 'power', ...spec };
  return {
    powerMw: simulateCapture(full, uniformStream(seed)),
    frequencyHz: axis(full.length, full.spacingPerWidth * 1000),
    spacingHz: full.spacingPerWidth * 1000,
    filterWidthHz: 1000,
    law: lawOf(full.sweeps),
    mask: new Uint8Array(full.length),
  };
}

function errorsDb(floorPower: Float64Array, truth: (at: number) => number) {
  let worst = 0;
  let mean = 0;
  floorPower.forEach((power, index) => {
    const errorDb = 10 * Math.log10(power / truth(index / (floorPower.length - 1)));
    mean += errorDb / floorPower.length;
    worst = Math.max(worst, Math.abs(errorDb));
  });
  return { worst, mean };
}

describe('a sample quantile', () => {
  it('is the interpolated order statistic, whatever the order', () => {
    const uniform = uniformStream(1);
    const values = Float64Array.from({ length: 999 }, () => uniform());
    const sorted = [...values].sort((one, other) => one - other);
    expect(sampleQuantile(values, 999, 0.5)).toBe(sorted[499]);
    expect(sampleQuantile(values, 999, 0.2)).toBe(sorted[199]);
    expect(sampleQuantile(new Float64Array([3, 1, 2, 4]), 4, 0.5)).toBe(2.5);
    expect(sampleQuantile(new Float64Array([7, 7, 7]), 3, 0.9)).toBe(7);
  });
});

describe('the robust floor', () => {
  it('is the mean power of flat noise at either quantile', () => {
    for (const quantile of [0.2, 0.5]) {
      const { floorPower, blocks } = robustFloor(
        ...floorArguments(capture({ length: 20001 }, 2), { quantile }),
      );
      expect(blocks).toBe(0);
      const { mean, worst } = errorsDb(floorPower, () => 1);
      expect(Math.abs(mean)).toBeLessThan(0.15);
      expect(worst).toBeLessThan(0.6);
    }
  });

  it('follows a tilt of 10 dB and humps of 6 and 10 dB', () => {
    const shapes: ((at: number) => number)[] = [
      (at) => 10 ** at,
      (at) => 1 + 3 * Math.exp(-(((at - 0.4) / 0.15) ** 2)),
      (at) => 1 + 9 * Math.exp(-(((at - 0.7) / 0.05) ** 2)),
    ];
    for (const shape of shapes) {
      const input = capture({ length: 20001, sweeps: 10, shape }, 3);
      const { floorPower } = robustFloor(...floorArguments(input));
      const { mean, worst } = errorsDb(floorPower, shape);
      expect(Math.abs(mean)).toBeLessThan(0.1);
      expect(worst).toBeLessThan(0.8);
    }
  });

  it('is unmoved by points that are left out', () => {
    const input = capture({ length: 5001, sweeps: 10 }, 4);
    const before = robustFloor(...floorArguments(input)).floorPower;
    const excluded = input.mask.slice();
    for (let index = 1000; index < 1400; index++) {
      input.powerMw[index] = 1e6;
      excluded[index] = 1;
    }
    const after = robustFloor(...floorArguments(input, { excluded })).floorPower;
    expect(Math.abs(10 * Math.log10(after[1200] / before[1200]))).toBeLessThan(0.3);
  });

  it('says so where nothing is left', () => {
    const input = capture({ length: 101 }, 5);
    expect(() => robustFloor(...floorArguments(input, { excluded: new Uint8Array(101).fill(1) }))).toThrow(
      RangeError,
    );
  });

  it('works on three points', () => {
    const { floorPower } = robustFloor(...floorArguments(capture({ length: 3 }, 6)));
    expect(floorPower.every((power) => power > 0 && Number.isFinite(power))).toBe(true);
  });
});

function floorArguments(
  input: ReturnType<typeof capture>,
  more: Partial<Parameters<typeof robustFloor>[2]> = {},
): Parameters<typeof robustFloor> {
  const { powerMw, frequencyHz, law, spacingHz, filterWidthHz } = input;
  return [powerMw, frequencyHz, { law, spacingHz, filterWidthHz, ...more }];
}

describe('the shape of the floor', () => {
  it('is a level for flat noise, whose tilt lies within its uncertainty', () => {
    let tilted = 0;
    let squares = 0;
    const captures = 120;
    for (let seed = 1; seed <= captures; seed++) {
      const shape = floorShape({ ...capture({ length: 801 }, seed * 37), tau: 3.01 });
      if (!shape.flat) tilted++;
      squares += (shape.tiltDb / shape.tiltUncertaintyDb) ** 2 / captures;
    }
    expect(tilted).toBeLessThanOrEqual(3);
    expect(squares).toBeGreaterThan(0.7);
    expect(squares).toBeLessThan(1.35);
  }, 30_000);

  it('finds a tilt of 3 dB with an uncertainty that covers it', () => {
    const shape = floorShape({
      ...capture({ length: 4001, sweeps: 5, shape: (at) => 10 ** (0.3 * at) }, 7),
      tau: 3.01,
    });
    expect(shape.model).toBe('tilt');
    expect(Math.abs(shape.tiltDb - 3)).toBeLessThan(3 * shape.tiltUncertaintyDb);
    expect(shape.tiltUncertaintyDb).toBeLessThan(0.5);
    expect(shape.rangeDb).toBeCloseTo(shape.tiltDb, 3);
  });

  it('finds a curve', () => {
    const shape = floorShape({
      ...capture({ length: 4001, sweeps: 5, shape: (at) => 10 ** (0.3 * (2 * at - 1) ** 2) }, 8),
      tau: 3.01,
    });
    expect(shape.model).toBe('curve');
    expect(Math.abs(shape.curvatureDb - 3)).toBeLessThan(3 * shape.curvatureUncertaintyDb);
  });

  it('leaves residuals whose mean is 1, so that it carries no bias of its own', () => {
    const input = capture({ length: 4001, shape: (at) => 10 ** (0.5 * at) }, 9);
    const { fittedPower } = floorShape({ ...input, tau: 3.01 });
    const mean = input.powerMw.reduce((sum, power, index) => sum + power / fittedPower[index], 0) / 4001;
    expect(mean).toBeCloseTo(1, 3);
  });
});

describe('ripple', () => {
  it('is found with its period and depth', () => {
    const input = capture(
      { length: 4001, sweeps: 10, shape: (at) => 1 + 0.15 * Math.cos(2 * Math.PI * 23.4 * at + 1) },
      10,
    );
    const ripple = findRipple(input.powerMw, input.frequencyHz, input.mask, 1000);
    expect(ripple).not.toBeNull();
    expect(Math.abs((ripple?.periodHz ?? 0) / ((4000 * 500) / 23.4) - 1)).toBeLessThan(0.01);
    expect(Math.abs((ripple?.depthDb ?? 0) - 10 * Math.log10(1.15 / 0.85))).toBeLessThan(0.25);
    expect(ripple?.falseAlarm).toBeLessThan(1e-4);
  });

  it('is not found in clean noise, nor in a hump', () => {
    let found = 0;
    for (let seed = 1; seed <= 150; seed++) {
      const shape =
        seed % 3 === 0 ? (at: number) => 1 + 3 * Math.exp(-(((at - 0.4) / 0.15) ** 2)) : undefined;
      const input = capture({ length: 1001, spacingPerWidth: seed % 2 === 0 ? 0.2 : 1, shape }, seed * 53);
      if (findRipple(input.powerMw, input.frequencyHz, input.mask, 1000, 0.01)) found++;
    }
    expect(found).toBeLessThanOrEqual(6);
  }, 30_000);

  it('is not a step in the floor', () => {
    const input = capture(
      { length: 4001, spacingPerWidth: 0.25, sweeps: 10, shape: (at) => (at < 0.5 ? 10 : 1) },
      9,
    );
    expect(findRipple(input.powerMw, input.frequencyHz, input.mask, 1000)).toBeNull();
  });

  it('is found through gaps', () => {
    const input = capture(
      { length: 4001, sweeps: 10, shape: (at) => 1 + 0.2 * Math.cos(2 * Math.PI * 15 * at) },
      11,
    );
    const mask = input.mask.map((_, index) => (index % 100 < 30 ? 1 : 0));
    const ripple = findRipple(input.powerMw, input.frequencyHz, mask, 1000);
    expect(Math.abs((ripple?.periodHz ?? 0) / ((4000 * 500) / 15) - 1)).toBeLessThan(0.02);
  });
});

describe('without a law of several looks', () => {
  it('the median of single looks is ln 2 of their mean', () => {
    expect(single.quantilePower(0.5)).toBeCloseTo(Math.LN2, 3);
  });
});
