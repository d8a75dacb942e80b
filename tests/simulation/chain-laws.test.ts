import { expect, test } from 'vitest';
import { chainOf } from '../../server/engine/chain.ts';
import { noiseBandwidthRatio } from '../../server/engine/noise-bandwidth.ts';
import { pointLaw } from '../../server/engine/point-law.ts';
import { simulateCapture } from '../support/simulator/capture.ts';
import { cells, specOf } from './cells.ts';

const NAMES = [
  'power20-dwell2',
  'log5-401',
  'log20-dwell2',
  'poles1-log10',
  'rms10-power1',
  'rms3-log20-401',
  'logdetector5-log4-401',
  'poles4-rms4-power5',
  'vbw.1-log1',
  'vbw.3-log8-401',
  'vbw.3-voltage4-401',
  'poles4-vbw.3-log4-401',
];
const CAPTURES = 6;

/** Centre and its standard error from one figure per capture. */
function over(figures: number[]) {
  const mean = figures.reduce((sum, figure) => sum + figure, 0) / figures.length;
  const squares = figures.reduce((sum, figure) => sum + (figure - mean) ** 2, 0);
  return { mean, error: Math.sqrt(squares / (figures.length - 1) / figures.length) };
}

const average = (values: Float64Array) => values.reduce((sum, value) => sum + value, 0) / values.length;

test.each(NAMES)('%s: a point’s bias and scatter are those of the law', { timeout: 120_000 }, (name) => {
  const cell = cells.find((one) => one.name === name);
  if (!cell) throw new Error(`no cell ${name}`);
  const { filterShape = 'gaussian', detector = 'sample', ...stated } = cell.stated;
  const ratio = noiseBandwidthRatio(filterShape, '3dB');
  const noiseBandwidthHz = ratio * cell.spec.rbwHz;
  const chain = chainOf({ ...stated, filterShape, detector, noiseBandwidthHz, points: cell.spec.points });
  const law = pointLaw(chain.stages);

  const levels = Array.from({ length: CAPTURES }, (_, index) => {
    const { levelDbm } = simulateCapture({ ...specOf(cell, 11, index), roundingDb: 0 });
    const trueDbm = cell.spec.densityDbmPerHz + 10 * Math.log10(noiseBandwidthHz);
    return levelDbm.map((level) => level - trueDbm);
  });
  const power = over(levels.map((level) => average(level.map((db) => Math.pow(10, db / 10)))));
  const centre = over(levels.map(average)).mean;
  const variance = over(levels.map((level) => average(level.map((db) => (db - centre) ** 2))));

  const bias = { mean: 10 * Math.log10(power.mean), error: (4.343 * power.error) / power.mean };
  const scatter = { mean: Math.sqrt(variance.mean), error: variance.error / 2 / Math.sqrt(variance.mean) };
  expect(bias.error).toBeLessThan(0.12);
  expect(Math.abs(bias.mean - law.biasDb)).toBeLessThan(0.03 + 4 * bias.error);
  expect(Math.abs(scatter.mean - law.scatterDb)).toBeLessThan(0.04 * law.scatterDb + 4 * scatter.error);
});
