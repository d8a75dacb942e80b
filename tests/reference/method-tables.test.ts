import { describe, expect, test } from 'vitest';
import { valuesInTime, valuesInVideoFilter } from '../../server/engine/effective-values.ts';
import { noiseBandwidthRatio } from '../../server/engine/noise-bandwidth.ts';
import { pointLaw } from '../../server/engine/point-law.ts';
import { db, stage } from './laws.ts';

/** The tables of the method's sections 1 to 4, with the digits printed there. */
const gaussian = { shape: 'gaussian' as const, noiseBandwidthHz: noiseBandwidthRatio('gaussian', '3dB') };

describe('1: values behind one point', () => {
  test.each([
    [0.25, 1.073],
    [0.5, 1.2774],
    [1, 1.909],
    [2, 3.3667],
    [5, 7.8593],
    [10, 15.379],
    [50, 75.589],
  ])('a detector over T·B3 = %d', (duration, values) => {
    expect(Math.abs(valuesInTime(gaussian, 'power', duration) / values - 1)).toBeLessThan(1e-4);
  });
  test.each([
    [10, 1.004, 1.014],
    [3, 1.037, 1.083],
    [1, 1.249, 1.392],
    [0.3, 2.284, 2.699],
    [0.1, 5.446, 6.591],
    [0.03, 16.615, 20.293],
    [0.01, 48.556, 59.469],
  ])('a video filter of VBW/RBW = %d', (ratio, power, log) => {
    expect(Math.abs(valuesInVideoFilter(gaussian, 'power', ratio) / power - 1)).toBeLessThan(1e-3);
    // At VBW/RBW = 10 the method prints 1.014; its own integral, by plain midpoints, is 1.0122.
    expect(Math.abs(valuesInVideoFilter(gaussian, 'log', ratio) / log - 1)).toBeLessThan(
      ratio === 10 ? 2e-3 : 1e-3,
    );
  });
});

describe('2: bias of the linear mean', () => {
  test.each([
    [1, 0],
    [2, -1.0491],
    [5, -1.8539],
    [10, -2.1659],
    [20, -2.3324],
    [50, -2.4361],
    [100, -2.4713],
  ])('log over %d', (n, biasDb) => {
    expect(pointLaw([stage('log', n)]).biasDb).toBeCloseTo(biasDb, 4);
    expect(pointLaw([stage('log', n), stage('power', 30)]).biasDb).toBeCloseTo(biasDb, 4);
  });
  test.each([
    [1, 0],
    [2, -0.4929],
    [10, -0.932],
    [100, -1.0373],
  ])('voltage over %d', (n, biasDb) => {
    expect(pointLaw([stage('voltage', n)]).biasDb).toBeCloseTo(biasDb, 4);
  });
  test.each([
    [2, -1.1742],
    [3, -0.7636],
    [10, -0.2208],
    [100, -0.0218],
  ])('power over %d, then log over many', (k, biasDb) => {
    expect(pointLaw([stage('power', k), stage('log', 1e6)]).biasDb).toBeCloseTo(biasDb, 4);
  });
  test.each([
    [2, 3],
    [4, 2],
    [1.909, 20],
  ])('power over %d, then log over %d: [Γ(k + 1/N)/Γ(k)]^N/k', (k, n) => {
    // Γ by Euler's integral on a log axis, trapezoid: no route through the engine.
    const gamma = (x: number) => {
      let sum = 0;
      for (let y = -30; y <= 6; y += 0.01) sum += Math.exp(x * y - Math.exp(y)) * 0.01;
      return sum;
    };
    const biasDb = db((gamma(k + 1 / n) / gamma(k)) ** n / k);
    expect(pointLaw([stage('power', k), stage('log', n)]).biasDb).toBeCloseTo(biasDb, 4);
  });
  test.each([1, 2.5, 40])('power over %d has none', (n) => {
    expect(Math.abs(pointLaw([stage('power', n)]).biasDb)).toBeLessThan(1e-9);
  });
});

describe('3: scatter in dB', () => {
  test.each([
    [1, 5.57],
    [10, 1.4084],
    [100, 0.4354],
  ])('power over %d', (n, scatterDb) => {
    expect(Math.abs(pointLaw([stage('power', n)]).scatterDb - scatterDb)).toBeLessThan(6e-5);
  });
  test.each([2.7, 5, 20, 100])('log over %d: 5.570/√n', (n) => {
    const law = pointLaw([stage('log', n)]);
    expect(law.scatterDb).toBeCloseTo(5.570043 / Math.sqrt(n), 5);
    expect(law.meanDb).toBeCloseTo(-2.506816, 5);
  });
});

test('4: noise bandwidth over RBW', () => {
  expect(noiseBandwidthRatio('gaussian', '3dB')).toBeCloseTo(1.06447, 5);
  expect(noiseBandwidthRatio('gaussian', '6dB')).toBeCloseTo(0.75269, 5);
  expect(noiseBandwidthRatio('poles4', '3dB')).toBeCloseTo(1.1285, 4);
  expect(noiseBandwidthRatio('rectangular', '3dB')).toBe(1);
});
