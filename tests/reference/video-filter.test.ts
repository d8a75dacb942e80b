import { describe, expect, test } from 'vitest';
import type { FilterShape } from '../../shared/settings.ts';
import { valuesInTime, valuesInVideoFilter } from '../../server/engine/effective-values.ts';
import { noiseBandwidthRatio } from '../../server/engine/noise-bandwidth.ts';
import { pointLaw } from '../../server/engine/point-law.ts';
import { checkValues, expectValue } from './check-values.ts';
import { stage } from './laws.ts';

/** A Gaussian filter of RBW 1 Hz. */
const gaussian = { shape: 'gaussian' as const, noiseBandwidthHz: noiseBandwidthRatio('gaussian', '3dB') };
const scaleOf = (letter: string) => (letter === 'p' ? 'power' : 'log');
const SHAPES: Record<string, FilterShape> = {
  gauss: 'gaussian',
  rect: 'rectangular',
  'sync.1': 'poles1',
  'sync.2': 'poles2',
  'sync.3': 'poles3',
  'sync.4': 'poles4',
  'sync.5': 'poles5',
};

describe('one-pole video filter behind a Gaussian filter', () => {
  test.each(checkValues(/vbw\.neff\.([pl])\.(\d+)/))('$id', ({ entry, caught: [letter, ratio] }) => {
    expectValue(entry, valuesInVideoFilter(gaussian, scaleOf(letter), 1 / Number(ratio)));
  });
  test.each(checkValues(/vbw\.sd\.l\.(\d+)/))('$id', ({ entry, caught: [ratio] }) => {
    const values = valuesInVideoFilter(gaussian, 'log', 1 / Number(ratio));
    expectValue(entry, pointLaw([stage('log', values)]).scatterDb);
  });
  test.each(checkValues(/vbw\.asym\.([pl])/))('$id', ({ entry, caught: [letter] }) => {
    expectValue(entry, valuesInVideoFilter(gaussian, scaleOf(letter), 1e-5) * 1e-5, 2e-5);
  });
  test.each(checkValues(/logvspower\.continuous/))('$id', ({ entry }) => {
    const values = (scale: 'power' | 'log') => valuesInTime(gaussian, scale, 1e5);
    const ratio = Math.sqrt((Math.PI ** 2 / 6) * (values('power') / values('log')));
    expectValue(entry, ratio, 1e-5);
  });
});

describe('long averages of a detector', () => {
  test.each(checkValues(/bs\.(.*)/))('$id', ({ entry, caught: [name] }) => {
    const filter = { shape: SHAPES[name], noiseBandwidthHz: 1 };
    // The rectangle's slowly falling correlation is cut at 12 lags: 0.9 % too many values.
    const own = name === 'rect' ? 0.01 : 1e-6;
    expectValue(entry, valuesInTime(filter, 'power', 1e6) / 1e6, own);
  });
});

test('short times and narrow ratios stay between one value and many', () => {
  for (const shape of Object.values(SHAPES)) {
    const filter = { shape, noiseBandwidthHz: 1 };
    expect(valuesInTime(filter, 'power', 1e-6)).toBeCloseTo(1, 4);
    expect(valuesInVideoFilter(filter, 'log', 1e4)).toBeCloseTo(1, 1);
    expect(valuesInTime(filter, 'log', 100)).toBeGreaterThan(valuesInTime(filter, 'power', 100));
  }
});
