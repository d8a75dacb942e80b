import { describe, expect, test } from 'vitest';
import {
  compensatedSum,
  dbToPower,
  dbToPowers,
  powerToDb,
  thermalDensityDbmPerHz,
} from '../../server/engine/units.ts';
import { checkValues, expectValue } from './check-values.ts';

describe('thermal noise', () => {
  test.each(checkValues(/kt0\.dbm|kt0\.pub\.173\.98/))('$id', ({ entry }) => {
    expectValue(entry, thermalDensityDbmPerHz());
  });
  test.each(checkValues(/kt\.([\d.]+)/))('$id', ({ entry, caught: [kelvin] }) => {
    expectValue(entry, thermalDensityDbmPerHz(Number(kelvin)));
  });
  test.each(checkValues(/ktb\.pub\.(.*)/))('$id', ({ entry, caught: [hz] }) => {
    expectValue(entry, thermalDensityDbmPerHz() + powerToDb(Number(hz)));
  });
  test.each(checkValues(/p372\.204/))('$id', ({ entry }) => {
    expectValue(entry, thermalDensityDbmPerHz() - 30);
  });
});

describe('decibels', () => {
  test('go to powers and back over ±400 dB', () => {
    const levels = Float64Array.from({ length: 801 }, (_, i) => i - 400);
    dbToPowers(levels).forEach((power, i) => {
      expect(power / 10 ** (levels[i] / 10)).toBeCloseTo(1, 12);
      expect(powerToDb(dbToPower(levels[i]))).toBeCloseTo(levels[i], 10);
    });
  });
  test('sums lose nothing to a large term', () => {
    expect(compensatedSum([1, 1e100, 1, -1e100])).toBe(2);
  });
});
