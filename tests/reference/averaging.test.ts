import { describe, expect, test } from 'vitest';
import { pointLaw } from '../../server/engine/point-law.ts';
import { checkValues, expectValue } from './check-values.ts';
import { db, stage } from './laws.ts';

/** Laws stand on grids: their moments and quantiles keep 6 digits. */
const MOMENT_DB = 1e-6;
const QUANTILE_DB = 2e-6;
const EXTREME_DB = 2e-5;
const MANY = 1e7;

describe('asymptotes', () => {
  test.each(checkValues(/log\.bias/))('$id', ({ entry }) => {
    expectValue(entry, pointLaw([]).meanDb, MOMENT_DB);
    expectValue(entry, pointLaw([stage('log', MANY)]).biasDb, 1e-5);
  });
  test.each(checkValues(/log\.bias\.pub\..*/))('$id', ({ entry }) => {
    expectValue(entry, -pointLaw([stage('log', MANY)]).biasDb);
  });
  test.each(checkValues(/volt\.bias/))('$id', ({ entry }) => {
    expectValue(entry, pointLaw([stage('voltage', MANY)]).biasDb, MOMENT_DB);
  });
  test.each(checkValues(/volt\.bias\.pub\..*/))('$id', ({ entry }) => {
    expectValue(entry, -pointLaw([stage('voltage', MANY)]).biasDb);
  });
  test.each(checkValues(/log\.sd/))('$id', ({ entry }) => {
    expectValue(entry, pointLaw([]).scatterDb, MOMENT_DB);
  });
});

describe('finite numbers of averages', () => {
  test.each(checkValues(/sd\.(power|log)\.(\d+)/))('$id', ({ entry, caught: [scale, n] }) => {
    const law = pointLaw([stage(scale === 'power' ? 'power' : 'log', Number(n))]);
    expectValue(entry, law.scatterDb, MOMENT_DB);
  });
  test.each(checkValues(/finite\.logavg\.(\d+)/))('$id', ({ entry, caught: [n] }) => {
    expectValue(entry, pointLaw([stage('log', Number(n))]).biasDb, MOMENT_DB);
  });
  test.each(checkValues(/gamma\.logavg\.(\d+)/))('$id', ({ entry, caught: [k] }) => {
    expectValue(entry, pointLaw([stage('power', Number(k))]).meanDb, MOMENT_DB);
    expectValue(entry, pointLaw([stage('power', Number(k)), stage('log', MANY)]).biasDb, 1e-5);
  });
  test.each(checkValues(/gamma\.voltavg\.(\d+)/))('$id', ({ entry, caught: [k] }) => {
    const law = pointLaw([stage('power', Number(k)), stage('voltage', MANY)]);
    expectValue(entry, law.biasDb, MOMENT_DB);
  });
});

describe('medians and tails', () => {
  test.each(checkValues(/median\.(\d+)/))('$id', ({ entry, caught: [k] }) => {
    expectValue(entry, db(pointLaw([stage('power', Number(k))]).quantilePower(0.5)), QUANTILE_DB);
  });
  test.each(checkValues(/p20\.mean/))('$id', ({ entry }) => {
    const { quantilePower } = pointLaw([]);
    const steps = 4000;
    let sum = 0;
    for (let i = 0; i < steps; i += 1) sum += quantilePower((0.2 * (i + 0.5)) / steps);
    expectValue(entry, db(sum / steps), 1e-3);
  });
  test.each(checkValues(/vr\.(up|lo)\.(\d+)\.(.*)/))('$id', ({ entry, caught: [side, freedom, reach] }) => {
    const law = pointLaw([stage('power', Number(freedom) / 2)]);
    const above = law.survivalPower(10 ** ((side === 'up' ? 1 : -1) * (Number(reach) / 10)));
    expectValue(entry, 100 * (side === 'up' ? above : 1 - above), entry.tolerance);
  });
});

describe('peaks', () => {
  test.each(checkValues(/peak\.bias\.(\d+)/))('$id', ({ entry, caught: [n] }) => {
    expectValue(entry, pointLaw([stage('largest', Number(n))]).biasDb, EXTREME_DB);
  });
  test.each(checkValues(/(peak|negpeak)\.meandb\.(\d+)/))('$id', ({ entry, caught: [which, n] }) => {
    const law = pointLaw([stage(which === 'peak' ? 'largest' : 'smallest', Number(n))]);
    expectValue(entry, law.meanDb, EXTREME_DB);
  });
  test('a peak of n values that is not whole reads the harmonic number of n', () => {
    // H(2.5) by its integral ∫0..1 (1 - x^2.5)/(1 - x) dx, midpoint rule.
    const steps = 1e5;
    let harmonic = 0;
    for (let i = 0; i < steps; i += 1) {
      const x = (i + 0.5) / steps;
      harmonic += (1 - x ** 2.5) / (1 - x) / steps;
    }
    expect(pointLaw([stage('largest', 2.5)]).meanPower).toBeCloseTo(harmonic, 4);
  });
});
