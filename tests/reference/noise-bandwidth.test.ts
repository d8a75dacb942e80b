import { describe, expect, test } from 'vitest';
import type { FilterShape } from '../../shared/settings.ts';
import { filterResponseDb, shapeWidths } from '../../server/engine/filter-shape.ts';
import { noiseBandwidthRatio, threeDbWidthHz } from '../../server/engine/noise-bandwidth.ts';
import { checkValues, expectValue } from './check-values.ts';

const POLES: FilterShape[] = ['poles1', 'poles2', 'poles3', 'poles4', 'poles5'];
const WINDOWS: Record<string, FilterShape> = {
  rect: 'fftRectangular',
  hann: 'fftHann',
  hamming: 'fftHamming',
  blackman: 'fftBlackman',
  bh92: 'fftBlackmanHarris',
  min4termBH: 'fftBlackmanHarris',
  scipyflat: 'fftFlatTop',
};

/** Full width where the response has fallen by so many dB, in -3 dB widths. */
function widthAtDb(shape: FilterShape, fallDb: number): number {
  let low = 0;
  let high = 30;
  for (let i = 0; i < 60; i += 1) {
    const middle = (low + high) / 2;
    if (filterResponseDb(shape, 1, middle) > -fallDb) low = middle;
    else high = middle;
  }
  return 2 * low;
}

const binsOf = (shape: FilterShape) => {
  const { noise, threeDb, sixDb } = shapeWidths(shape);
  const scallopDb = -filterResponseDb(shape, threeDb, 0.5);
  return { enbw: noise, b3hp: threeDb, b6: sixDb, ratio: 10 * Math.log10(noise / threeDb), flat: scallopDb };
};

describe('analogue filters', () => {
  test.each(checkValues(/enbw\.sync2?\.(\d)/))('$id', ({ entry, caught: [n] }) => {
    expectValue(entry, noiseBandwidthRatio(POLES[Number(n) - 1], '3dB'));
  });
  test.each(checkValues(/enbw6\.sync\.(\d)/))('$id', ({ entry, caught: [n] }) => {
    expectValue(entry, noiseBandwidthRatio(POLES[Number(n) - 1], '6dB'));
  });
  test.each(checkValues(/b6b3\.sync\.(\d)/))('$id', ({ entry, caught: [n] }) => {
    const { sixDb, threeDb } = shapeWidths(POLES[Number(n) - 1]);
    expectValue(entry, sixDb / threeDb);
    expectValue(entry, widthAtDb(POLES[Number(n) - 1], 20 * Math.log10(2)), 1e-6);
  });
  test.each(checkValues(/enbw\.gauss\.(3|6)db/))('$id', ({ entry, caught: [kind] }) => {
    expectValue(entry, noiseBandwidthRatio('gaussian', kind === '3' ? '3dB' : '6dB'));
  });
  test.each(checkValues(/enbw\.gauss\.([36])\.000/))('$id', ({ entry, caught: [fall] }) => {
    expectValue(entry, noiseBandwidthRatio('gaussian', '3dB') / widthAtDb('gaussian', Number(fall)));
  });
  test.each(checkValues(/shape\.([45])\.pub/))('$id', ({ entry, caught: [n] }) => {
    expectValue(entry, widthAtDb(POLES[Number(n) - 1], 60));
  });
  test.each(checkValues(/skirt\.H\.pub/))('$id', ({ entry }) => {
    expectValue(entry, filterResponseDb('poles4', 3e3, 4e3));
  });
  test.each(checkValues(/cispr\.nbw\.(\d+)/))('$id', ({ entry, caught: [sixDbHz] }) => {
    expectValue(entry, Number(sixDbHz) * noiseBandwidthRatio('gaussian', '6dB'));
  });
});

describe('windows of FFT analysers', () => {
  test.each(checkValues(/win\.(enbw|b3hp|b6|ratio|flat)\.(hann|hamming|bh92)/))(
    '$id',
    ({ entry, caught: [figure, window] }) => {
      expectValue(entry, Reflect.get(binsOf(WINDOWS[window]), figure));
    },
  );
  test.each(checkValues(/win\.b3\.(hann|hamming|bh92)/))('$id', ({ entry, caught: [window] }) => {
    const shape = WINDOWS[window];
    expectValue(entry, widthAtDb(shape, 3) * shapeWidths(shape).threeDb);
  });
  test.each(checkValues(/win\.(rect|blackman|scipyflat)\.(enbw|b3|b6)/))(
    '$id',
    ({ entry, caught: [window, figure] }) => {
      expectValue(entry, Reflect.get(binsOf(WINDOWS[window]), figure === 'b3' ? 'b3hp' : figure));
    },
  );
  test.each(checkValues(/harris\.(\w+)\.(enbw|b3|b6|scallop)/))(
    '$id',
    ({ entry, caught: [window, figure] }) => {
      const name = figure === 'b3' ? 'b3hp' : figure === 'scallop' ? 'flat' : figure;
      expectValue(entry, Reflect.get(binsOf(WINDOWS[window]), name));
    },
  );
});

test('a bandwidth that is the noise bandwidth stays as it is, and widths invert', () => {
  for (const shape of [...POLES, ...Object.values(WINDOWS), 'gaussian', 'rectangular'] as const) {
    expect(noiseBandwidthRatio(shape, 'noise')).toBe(1);
    expect(threeDbWidthHz(shape, 5e3 * noiseBandwidthRatio(shape, '3dB'))).toBeCloseTo(5e3, 8);
  }
});
