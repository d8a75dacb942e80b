import { describe, expect, test } from 'vitest';
import { simulateCapture } from '../support/simulator/capture.ts';
import { mixSeed } from '../support/simulator/random.ts';
import type { CaptureSpec } from '../support/simulator/spec.ts';

const clean: Omit<CaptureSpec, 'seed'> = {
  startHz: 1000,
  stopHz: 2000,
  points: 1001,
  rbwHz: 1,
  filter: { shape: 'gaussian' },
  mode: { kind: 'swept', dwellInRbw: 2 },
  detector: 'sample',
  averagingScale: 'power',
  sweeps: 1,
  densityDbmPerHz: 0,
};

const captures = (changes: Partial<CaptureSpec>, count: number) =>
  Array.from({ length: count }, (_, i) => simulateCapture({ ...clean, ...changes, seed: mixSeed(7, i) }));

const mean = (values: ArrayLike<number>) => {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i];
  return sum / values.length;
};
const toDb = (power: number) => 10 * Math.log10(power);
const toPower = (db: number) => Math.pow(10, db / 10);

/** A figure of each capture: its mean over the captures and the standard error of that. */
function over(figures: number[]) {
  const centre = mean(figures);
  const variance =
    mean(figures.map((figure) => (figure - centre) ** 2)) * (figures.length / (figures.length - 1));
  return { mean: centre, error: Math.sqrt(variance / figures.length) };
}

/** Mean level of the linear powers in dB re the density; its standard error from the captures' spread. */
function meanReading(changes: Partial<CaptureSpec>, count: number) {
  return over(captures(changes, count).map(({ levelDbm }) => toDb(mean(levelDbm.map(toPower)))));
}

/** Independent values behind a point, from the relative variance of the linear powers. */
function valuesBehindPoint(changes: Partial<CaptureSpec>, count: number) {
  const powers = captures(changes, count).map(({ levelDbm }) => levelDbm.map(toPower));
  const level = mean(powers.map((power) => mean(power)));
  const spread = over(powers.map((power) => mean(power.map((one) => (one / level - 1) ** 2))));
  return { mean: 1 / spread.mean, error: spread.error / spread.mean ** 2 };
}

function scatter(changes: Partial<CaptureSpec>, count: number) {
  const levels = captures(changes, count).map(({ levelDbm }) => levelDbm);
  const centre = mean(levels.map((level) => mean(level)));
  const squares = over(levels.map((level) => mean(level.map((one) => (one - centre) ** 2))));
  return { mean: Math.sqrt(squares.mean), error: squares.error / 2 / Math.sqrt(squares.mean) };
}

/** Within four standard errors, and those small enough for the check to mean something. */
function expectNear(seen: { mean: number; error: number }, value: number, largestError: number) {
  expect(seen.error).toBeLessThan(largestError);
  expect(Math.abs(seen.mean - value)).toBeLessThan(4 * seen.error + largestError / 10);
}

const poles = (count: number) => ({ shape: 'poles' as const, poles: count });
const dwell = (dwellInRbw: number) => ({ kind: 'swept' as const, dwellInRbw });

describe('noise bandwidth over the -3 dB width (method, section 4)', () => {
  test.each([
    ['Gaussian', { shape: 'gaussian' as const }, 1.06447],
    ['1 pole', poles(1), 1.5708],
    ['4 poles', poles(4), 1.1285],
    ['5 poles', poles(5), 1.1138],
    ['rectangular', { shape: 'rectangular' as const }, 1],
  ])('%s', (_, filter, ratio) => {
    expectNear(meanReading({ filter, sweeps: 20 }, 12), toDb(ratio), 0.015);
  });

  test.each([
    // Widths of the windows in bins at -3 dB from memory: 1.4406, 1.3029, 1.8962, 3.7248; ENBW 1.5, 1.3628, 2.0044, 3.7702.
    ['hann' as const, 1.5 / 1.4406],
    ['hamming' as const, 1.3628 / 1.3029],
    ['blackmanHarris' as const, 2.0044 / 1.8962],
    ['flatTop' as const, 3.7702 / 3.7248],
    ['gaussian' as const, 1.06447],
  ])('window %s', (window, ratio) => {
    expectNear(meanReading({ mode: { kind: 'fft', window }, sweeps: 20 }, 15), toDb(ratio), 0.015);
  });
});

describe('bias of the linear mean (method, section 2)', () => {
  const bandwidth = toDb(1.06447);

  test.each([
    [1, 0],
    [2, -1.0491],
    [5, -1.8539],
    [20, -2.3324],
    [100, -2.4713],
  ])('log over %i sweeps', (sweeps, bias) => {
    expectNear(meanReading({ sweeps, averagingScale: 'log' }, sweeps > 20 ? 6 : 20), bias + bandwidth, 0.05);
  });

  test.each([
    [2, -0.4929],
    [10, -0.932],
  ])('voltage over %i sweeps', (sweeps, bias) => {
    expectNear(meanReading({ sweeps, averagingScale: 'voltage' }, 20), bias + bandwidth, 0.05);
  });

  test.each([
    [0.1, 1, 15, -2.003, 0.012],
    [0.3, 1, 5, -1.342, 0.018],
    [0.3, 8, 5, -2.347, 0.007],
    [1, 1, 2, -0.486, 0.034],
  ])(
    'log video filter, VBW/RBW %f, %i sweeps, as another simulation saw it',
    (vbwHz, sweeps, dwellInRbw, bias, error) => {
      const changes = { vbwHz, sweeps, mode: dwell(dwellInRbw), averagingScale: 'log' as const };
      const seen = meanReading(changes, sweeps > 1 ? 6 : 24);
      expectNear({ mean: seen.mean, error: Math.hypot(seen.error, error) }, bias + bandwidth, 0.06);
    },
  );

  test('highest of 10 sweeps: the tenth harmonic number', () => {
    const seen = over(
      captures({ sweeps: 10 }, 20).map(({ maxHoldDbm }) => toDb(mean(maxHoldDbm.map(toPower)))),
    );
    expectNear(seen, 4.6671 + bandwidth, 0.03);
  });
});

describe('scatter of a point (method, sections 1 and 3)', () => {
  test.each([
    ['power' as const, 1, 5.57],
    ['power' as const, 10, 1.4084],
    ['power' as const, 100, 0.4354],
    ['log' as const, 20, 1.2455],
  ])('%s over %i sweeps, dB', (averagingScale, sweeps, value) => {
    expectNear(scatter({ averagingScale, sweeps }, sweeps > 20 ? 6 : 20), value, 0.05 * value);
  });

  test.each([
    [0.25, 1.073],
    [1, 1.909],
    [5, 7.8593],
    [10, 15.379],
  ])('values in a dwell of %f/RBW behind an average detector', (dwellInRbw, values) => {
    const seen = valuesBehindPoint(
      { detector: 'average', mode: dwell(dwellInRbw) },
      dwellInRbw < 1 ? 90 : 24,
    );
    expectNear(seen, values, 0.03 * values);
  });

  test.each([
    [3, 1.037],
    [1, 1.249],
    [0.3, 2.284],
    [0.1, 5.446],
  ])('values behind a video filter on the power scale, VBW/RBW %f', (vbwHz, values) => {
    expectNear(valuesBehindPoint({ vbwHz, mode: dwell(1.5 / vbwHz) }, 20), values, 0.05 * values);
  });

  test('neighbours are correlated by the time between them', () => {
    // exp(-4 pi^2 sigma^2 t^2) with sigma = B3/2.35482, t = 0.25/B3: 0.6410.
    const seen = over(
      captures({ mode: dwell(0.25) }, 24).map(({ levelDbm }) => {
        const power = levelDbm.map((db) => toPower(db) / 1.06447 - 1);
        return mean(power.slice(1).map((one, k) => one * power[k]));
      }),
    );
    expectNear(seen, Math.exp(-(((2 * Math.PI * 0.25) / 2.35482) ** 2)), 0.05);
  });

  test('neighbouring bins are correlated by their overlap', () => {
    // Two bins of a Gaussian window a half RBW apart share 2^(-2 (1/2)^2) of their power's fluctuation.
    const seen = over(
      captures({ mode: { kind: 'fft', window: 'gaussian' }, stopHz: 1500 }, 24).map(({ levelDbm }) => {
        const power = levelDbm.map((db) => toPower(db) / 1.06447 - 1);
        return mean(power.slice(1).map((one, k) => one * power[k]));
      }),
    );
    expectNear(seen, Math.SQRT1_2, 0.05);
  });
});

describe('signals', () => {
  const signal = { spurs: [{ hz: 1500, levelDbm: 20 }], densityDbmPerHz: -120, stopHz: 2000, rbwHz: 20 };

  test.each([
    ['swept, Gaussian', {}],
    ['swept, 4 poles', { filter: poles(4) }],
    ['transformed', { mode: { kind: 'fft' as const, window: 'hann' as const } }],
  ])('%s: full level at its frequency, half the power half an RBW away', (_, changes) => {
    const { levelDbm } = simulateCapture({ ...clean, ...signal, ...changes, seed: 3 });
    expect(levelDbm[500]).toBeCloseTo(20, 3);
    expect(levelDbm[490]).toBeCloseTo(20 - 3.0103, 2);
    expect(levelDbm[510]).toBeCloseTo(20 - 3.0103, 2);
  });

  test.each([
    ['log' as const, 0.953],
    ['power' as const, 3.01],
  ])(
    'as strong as the noise, the %s scale reads %f dB high (method, section 8)',
    (averagingScale, excess) => {
      const level = toDb(1.06447);
      const changes = { averagingScale, sweeps: 400, points: 101, startHz: 1450, stopHz: 1550 };
      const seen = captures({ ...changes, spurs: [{ hz: 1500, levelDbm: level }] }, 12).map(
        ({ levelDbm }) => levelDbm[50] - level,
      );
      expectNear(over(seen), excess, 0.1);
    },
  );
});

describe('a capture', () => {
  test('is the same for the same seed and another for another', () => {
    const spec = { ...clean, sweeps: 3, detector: 'average' as const, roundingDb: 0.01 };
    const first = simulateCapture({ ...spec, seed: 5 });
    expect(simulateCapture({ ...spec, seed: 5 }).levelDbm).toEqual(first.levelDbm);
    expect(simulateCapture({ ...spec, seed: 6 }).levelDbm).not.toEqual(first.levelDbm);
  });

  test('carries tilt, external gain, own noise and rounding', () => {
    const spec = {
      ...clean,
      sweeps: 200,
      tiltDb: 6,
      externalGainDb: 20,
      ownNoiseDbmPerHz: 15,
      roundingDb: 0.1,
    };
    const { levelDbm, truth } = simulateCapture({ ...spec, seed: 8 });
    const expected = (shapeDb: number) => toDb(toPower(20 + shapeDb) + toPower(15)) + toDb(1.06447);
    expect(mean(levelDbm.slice(0, 100))).toBeCloseTo(expected(-2.7), 0);
    expect(mean(levelDbm.slice(-100))).toBeCloseTo(expected(2.7), 0);
    expect(truth.displayedDensityDbmPerHz).toBeCloseTo(
      toDb(toPower(truth.densityDbmPerHz + 20) + toPower(15)),
      9,
    );
    for (const level of levelDbm) expect(Math.abs(level * 10 - Math.round(level * 10))).toBeLessThan(1e-6);
  });

  test('of 1,001 points and 20 sweeps takes less than a second', () => {
    const before = performance.now();
    simulateCapture({ ...clean, sweeps: 20, seed: 1 });
    expect(performance.now() - before).toBeLessThan(1000);
  });
});
