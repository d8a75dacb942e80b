import { describe, expect, it } from 'vitest';
import { valuesInVideoFilter } from '../../server/engine/effective-values.ts';
import { pointLaw, type PointLaw } from '../../server/engine/point-law.ts';
import { findFamilies } from '../../server/engine/spurs-families.ts';
import { exponentialIntegral, signalPower } from '../../server/engine/spurs-level.ts';
import { thresholdFactor } from '../../server/engine/spurs-threshold.ts';
import { findSpurs, type SpurSearch } from '../../server/engine/spurs.ts';
import {
  axis,
  gaussianResponseDb,
  simulateCapture,
  simulateVideoCapture,
  uniformStream,
  type CaptureSpec,
  type Scale,
} from './support/noise.ts';

const FILTER_WIDTH_HZ = 1000;

function sweepsLaw(scale: Scale, values: number): PointLaw {
  return pointLaw([{ place: 'sweeps', scale, values }]);
}

function videoLaw(scale: Scale, videoPerWidth: number): PointLaw {
  const filter = { shape: 'gaussian' as const, noiseBandwidthHz: 1.0645 };
  return pointLaw([{ place: 'video', scale, values: valuesInVideoFilter(filter, scale, videoPerWidth) }]);
}

function search(
  powerMw: Float64Array,
  spacingPerWidth: number,
  law: PointLaw,
  more: Partial<SpurSearch> = {},
) {
  const spacingHz = spacingPerWidth * FILTER_WIDTH_HZ;
  return findSpurs({
    powerMw,
    frequencyHz: axis(powerMw.length, spacingHz),
    law,
    scale: 'power',
    filterResponseDb: gaussianResponseDb(FILTER_WIDTH_HZ),
    filterWidthHz: FILTER_WIDTH_HZ,
    spacingHz,
    falseAlarm: 0.01,
    ...more,
  });
}

function searchCapture(spec: CaptureSpec, seed: number, more: Partial<SpurSearch> = {}) {
  const powerMw = simulateCapture(spec, uniformStream(seed));
  const law = sweepsLaw(spec.scale, spec.sweeps);
  return { powerMw, ...search(powerMw, spec.spacingPerWidth, law, { scale: spec.scale, ...more }) };
}

function keptMeanDb(powerMw: Float64Array, mask: Uint8Array): number {
  const kept = powerMw.filter((_, index) => mask[index] === 0);
  return 10 * Math.log10(kept.reduce((sum, power) => sum + power, 0) / kept.length);
}

describe('clean noise', () => {
  const captures = 400;
  // 1 % of 400 captures is 4; 12 or more would happen with probability 0.001 (binomial).
  const mostFalse = 11;
  const cases: {
    name: string;
    law: PointLaw;
    spacing: number;
    scale: Scale;
    video?: number;
    sweeps?: number;
  }[] = [
    { name: 'sample, 0.1 RBW apart', law: sweepsLaw('power', 1), spacing: 0.1, scale: 'power' },
    { name: 'sample, 1 RBW apart', law: sweepsLaw('power', 1), spacing: 1, scale: 'power' },
    { name: 'sample, 3 RBW apart', law: sweepsLaw('power', 1), spacing: 3, scale: 'power' },
    { name: '20 power sweeps', law: sweepsLaw('power', 20), spacing: 0.5, scale: 'power', sweeps: 20 },
    { name: '10 log sweeps', law: sweepsLaw('log', 10), spacing: 0.7, scale: 'log', sweeps: 10 },
    { name: '5 voltage sweeps', law: sweepsLaw('voltage', 5), spacing: 0.7, scale: 'voltage', sweeps: 5 },
    { name: 'video filter 0.1, power', law: videoLaw('power', 0.1), spacing: 1, scale: 'power', video: 0.1 },
    { name: 'video filter 0.3, log', law: videoLaw('log', 0.3), spacing: 1, scale: 'log', video: 0.3 },
  ];
  it.each(cases)(
    'raises no more spurs than the false-alarm probability allows: $name',
    (chain) => {
      let alarms = 0;
      for (let seed = 1; seed <= captures; seed++) {
        const uniform = uniformStream(seed * 7919);
        const length = 301;
        const powerMw =
          chain.video === undefined
            ? simulateCapture(
                { length, spacingPerWidth: chain.spacing, sweeps: chain.sweeps ?? 1, scale: chain.scale },
                uniform,
              )
            : simulateVideoCapture(length, 2, chain.video, chain.scale, uniform);
        const found = search(powerMw, chain.spacing, chain.law, {
          scale: chain.scale,
          videoSmoothed: chain.video !== undefined,
        });
        if (found.spurs.length > 0) alarms++;
      }
      expect(alarms).toBeLessThanOrEqual(mostFalse);
    },
    30_000,
  );

  it('raises alarms in about the asked share when the share is large', () => {
    let alarms = 0;
    for (let seed = 1; seed <= 200; seed++) {
      const found = searchCapture({ length: 301, spacingPerWidth: 3, sweeps: 1, scale: 'power' }, seed * 31, {
        falseAlarm: 0.3,
      });
      if (found.spurs.length > 0) alarms++;
    }
    expect(alarms).toBeGreaterThan(25);
    expect(alarms).toBeLessThan(85);
  }, 30_000);

  it('stays quiet on a floor with a hump of 6 dB', () => {
    let alarms = 0;
    for (let seed = 1; seed <= 60; seed++) {
      const found = searchCapture(
        {
          length: 1501,
          spacingPerWidth: 0.5,
          sweeps: 10,
          scale: 'power',
          shape: (at) => 1 + 3 * Math.exp(-(((at - 0.4) / 0.15) ** 2)),
        },
        seed * 101,
      );
      if (found.spurs.length > 0) alarms++;
    }
    expect(alarms).toBeLessThanOrEqual(4);
  }, 30_000);
});

describe('a spur', () => {
  it('is found with its frequency, level, excess and the width of a CW signal', () => {
    const { spurs } = searchCapture(
      { length: 1001, spacingPerWidth: 0.2, sweeps: 20, scale: 'power', tones: [{ at: 400.3, levelDb: 25 }] },
      11,
    );
    expect(spurs).toHaveLength(1);
    expect(spurs[0].hz).toBeCloseTo(1e6 + 400.3 * 200, -2);
    expect(spurs[0].levelDbm).toBeGreaterThan(24.7);
    expect(spurs[0].levelDbm).toBeLessThan(25.3);
    expect(Math.abs(spurs[0].excessDb - 25)).toBeLessThan(0.6);
    expect(spurs[0].widthClass).toBe('filter');
    expect(Math.abs(spurs[0].widthHz / FILTER_WIDTH_HZ - 1)).toBeLessThan(0.1);
    expect(spurs[0].fromHz).toBeLessThan(spurs[0].hz - FILTER_WIDTH_HZ);
    expect(spurs[0].toHz).toBeGreaterThan(spurs[0].hz + FILTER_WIDTH_HZ);
  });

  it('leaves no trace in the mean of what is kept', () => {
    const clean = { length: 4001, spacingPerWidth: 0.5, sweeps: 50, scale: 'power' as const };
    const tones = [300, 900.4, 1500, 2200.7, 3000].map((at) => ({ at, levelDb: 60 }));
    const { powerMw, mask } = searchCapture({ ...clean, tones }, 12);
    const without = simulateCapture(clean, uniformStream(12));
    expect(Math.abs(keptMeanDb(powerMw, mask) - keptMeanDb(without, mask))).toBeLessThan(0.06);
    expect(Math.abs(keptMeanDb(powerMw, mask))).toBeLessThan(0.06);
  });

  it('is two where two carriers stand two filter widths apart', () => {
    const { spurs } = searchCapture(
      {
        length: 1001,
        spacingPerWidth: 0.1,
        sweeps: 10,
        scale: 'power',
        tones: [
          { at: 500, levelDb: 40 },
          { at: 520, levelDb: 40 },
        ],
      },
      13,
    );
    expect(spurs.map((spur) => Math.round((spur.hz - 1e6) / 100))).toEqual([500, 520]);
    expect(spurs[0].toIndex).toBeLessThan(spurs[1].fromIndex);
  });

  it('is found at both edges of the span', () => {
    const { spurs } = searchCapture(
      {
        length: 601,
        spacingPerWidth: 0.5,
        sweeps: 10,
        scale: 'power',
        tones: [
          { at: 0, levelDb: 30 },
          { at: 600, levelDb: 30 },
        ],
      },
      14,
    );
    expect(spurs.map((spur) => spur.index)).toEqual([0, 600]);
  });

  it('is found on a tilted floor whose other end is higher than it', () => {
    const { spurs } = searchCapture(
      {
        length: 2001,
        spacingPerWidth: 0.5,
        sweeps: 20,
        scale: 'power',
        shape: (at) => 10 ** (2 * at),
        tones: [{ at: 200, levelDb: 12 }],
      },
      15,
    );
    expect(spurs.map((spur) => Math.round((spur.hz - 1e6) / 500))).toEqual([200]);
  });

  it('is one and wider than the filter where a signal is modulated', () => {
    const tones = Array.from({ length: 41 }, (_, order) => ({ at: 950 + 2.5 * order, levelDb: 20 }));
    const { spurs } = searchCapture(
      { length: 2001, spacingPerWidth: 0.2, sweeps: 20, scale: 'power', tones },
      16,
    );
    expect(spurs).toHaveLength(1);
    expect(spurs[0].widthClass).toBe('wider');
  });

  it('is narrower than the filter where one point of many in a filter width jumps', () => {
    const powerMw = simulateCapture(
      { length: 1001, spacingPerWidth: 0.1, sweeps: 20, scale: 'power' },
      uniformStream(17),
    );
    powerMw[600] = 100;
    const { spurs } = search(powerMw, 0.1, sweepsLaw('power', 20));
    expect(spurs).toHaveLength(1);
    expect(spurs[0].widthClass).toBe('narrower');
    expect(spurs[0].levelDbm).toBeCloseTo(20, 6);
  });

  it('is not searched where a person left points out', () => {
    const powerMw = simulateCapture(
      { length: 1001, spacingPerWidth: 0.3, sweeps: 5, scale: 'power', tones: [{ at: 500, levelDb: 30 }] },
      uniformStream(18),
    );
    const excluded = new Uint8Array(1001).fill(1, 480, 521);
    expect(search(powerMw, 0.3, sweepsLaw('power', 5), { excluded }).spurs).toHaveLength(0);
  });

  it('has the noise taken out of its level on each scale', () => {
    for (const scale of ['power', 'log', 'voltage'] as const) {
      const levels = [1, 2, 3, 4, 5, 6].map((seed) => {
        const { spurs } = searchCapture(
          { length: 401, spacingPerWidth: 0.5, sweeps: 100, scale, tones: [{ at: 200, levelDb: 3 }] },
          seed * 19,
        );
        return spurs[0].correctedLevelDbm ?? Number.NaN;
      });
      const meanDb = levels.reduce((sum, level) => sum + level, 0) / levels.length;
      expect(Math.abs(meanDb - 3)).toBeLessThan(0.45);
    }
  });
});

describe('many spurs', () => {
  it('forty in a hundred points contaminated move the kept mean by less than 0.1 dB', () => {
    for (const [sweeps, scale] of [
      [1, 'power'],
      [20, 'power'],
      [10, 'log'],
    ] as const) {
      const length = 8001;
      // Behind a Gaussian filter 30 dB up, a tone stands above the noise over about 3.2 widths: every 8 widths, 40 %.
      const tones = Array.from({ length: 249 }, (_, order) => ({ at: 20 + 32 * order, levelDb: 30 }));
      const { powerMw, mask, spurs } = searchCapture(
        { length, spacingPerWidth: 0.25, sweeps, scale, tones },
        21,
      );
      const law = sweepsLaw(scale, sweeps);
      const biasDb = keptMeanDb(powerMw, mask) - 10 * Math.log10(law.meanPower);
      const statisticalDb = (4.343 * Math.sqrt(law.relativeVariance * 6)) / Math.sqrt(length * 0.35);
      expect(Math.abs(biasDb)).toBeLessThan(0.1 + 2 * statisticalDb);
      expect(spurs.length).toBeGreaterThan(235);
      expect(spurs.length).toBeLessThan(260);
      const family = spurs.find((spur) => spur.family)?.family;
      expect(family?.spacingHz).toBeCloseTo(8000, -2);
      expect(family?.members).toBeGreaterThan(200);
    }
  });

  it('are sorted into evenly spaced families, chance left alone', () => {
    const uniform = uniformStream(5);
    const comb = Array.from({ length: 9 }, (_, order) => 1000 + 777 * order);
    const strays = Array.from({ length: 12 }, () => 10000 * uniform());
    const frequencies = [...comb, ...strays].sort((one, other) => one - other);
    const families = findFamilies(frequencies, 2, 10000);
    expect(families).toHaveLength(1);
    expect(families[0].spacingHz).toBeCloseTo(777, 0);
    expect(families[0].members.map((member) => frequencies[member])).toEqual(comb);
    expect(findFamilies([100, 230, 505, 1700], 2, 10000)).toEqual([]);
  });
});

describe('the threshold', () => {
  it.each([
    // Cell-averaging multiplier of the mean, cells·(p^(-1/cells) - 1): reference section 8, computed there.
    [8, 1e-3, 10.971],
    [20, 1e-6, 19.9052],
    [100, 1e-6, 14.8154],
  ])('is the cell-averaging one for single looks: %d cells, p = %d', (cells, probability, expected) => {
    const law = { meanPower: 1, relativeVariance: 1, survivalPower: (power: number) => Math.exp(-power) };
    expect(thresholdFactor(law, probability, cells) / expected).toBeCloseTo(1, 3);
  });
  it('is the quantile of the law where the floor is known', () => {
    const law = { meanPower: 1, relativeVariance: 1, survivalPower: (power: number) => Math.exp(-power) };
    expect(10 * Math.log10(thresholdFactor(law, 1e-6, Infinity))).toBeCloseTo(11.4037, 3);
  });
});

describe('a CW signal in noise', () => {
  it('reads +3.010 dB at 0 dB signal to noise on a power scale and +0.953 dB on a log scale', () => {
    // Reference section 0, fact 6 (computed there).
    expect(10 * Math.log10(signalPower(2, 1, 'power') ?? 0)).toBeCloseTo(0, 9);
    expect(10 * Math.log10(signalPower(10 ** 0.0953, 1, 'log') ?? 0)).toBeCloseTo(0, 3);
  });
  it('has nothing left at or below what noise alone reads', () => {
    expect(signalPower(0.99, 1, 'power')).toBeNull();
    expect(signalPower(0.56, 1, 'log')).toBeNull();
    expect(signalPower(0.78, 1, 'voltage')).toBeNull();
  });
  it('rests on an exponential integral with E1(1) = 0.2193839344', () => {
    // Abramowitz and Stegun, table 5.1; from memory.
    expect(exponentialIntegral(1)).toBeCloseTo(0.2193839344, 9);
    expect(exponentialIntegral(2)).toBeCloseTo(0.0489005107, 9);
  });
});
