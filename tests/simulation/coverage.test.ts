import { describe, expect, test } from 'vitest';
import { binomialLimits } from './binomial.ts';
import { cells } from './cells.ts';
import { summarise, type Summary } from './summary.ts';
import { runTrial } from './trial.ts';

/** Chance that one check of a right engine fails: the seed is fixed, so it fails always or never. */
const RISK = 0.001;
const SEED = 2026;

function measured(name: string, captures: number) {
  const cell = cells.find((one) => one.name === name);
  if (!cell) throw new Error(`no cell ${name}`);
  const trials = Array.from({ length: captures }, (_, index) => runTrial(cell, SEED, index));
  return { cell, trials, summary: summarise(cell, trials) };
}

function expectCalibrated(summary: Summary) {
  const { captures, covered, meanErrorDb, standardErrorDb } = summary;
  const limits = binomialLimits(captures, 0.95, RISK);
  expect(summary.withoutDensity).toBe(0);
  expect(covered).toBeGreaterThanOrEqual(limits.low);
  expect(covered).toBeLessThanOrEqual(limits.high);
  expect(Math.abs(meanErrorDb ?? NaN)).toBeLessThan(Math.max(0.03, 4 * (standardErrorDb ?? NaN)));
  expect(summary.largestLedgerGapDb).toBeLessThan(1e-9);
  expect(summary.capturesWithFalseSpurs).toBeLessThanOrEqual(binomialLimits(captures, 0.01, RISK).high);
  expect(summary.wrongVerdicts / captures).toBeLessThanOrEqual(0.05);
}

describe('the 95 % interval covers the truth, with the averaging as declared', () => {
  test.each([
    ['power20-dwell.25', 50],
    ['power1', 120],
    ['power100-401', 40],
    ['log5-401', 100],
    ['log20-dwell.25', 50],
    ['poles4-log20', 50],
    ['poles1-power20', 40],
    ['rms10-power1', 40],
    ['vbw.1-log1', 40],
    ['vbw1-log10-401', 40],
    ['fft-gaussian-power20-s.3', 50],
    ['fft-hann-log20-s.35', 40],
    ['fft-gaussian-power10-s3', 40],
    ['log20-round1', 40],
    ['power20-tilt6', 40],
    ['log20-spurs5', 50],
    ['power1-spurs3', 100],
    ['log20-tilt6-spurs5-round.1', 40],
  ])('%s, and the check says so', { timeout: 120_000 }, (name, captures) => {
    const { summary } = measured(name, captures);
    expectCalibrated(summary);
    expect(summary.rightVerdicts / captures).toBeGreaterThanOrEqual(0.9);
  });

  test.each([
    // Power averages before the log scale, so few points, or voltage averages scatter nearly as another chain would.
    ['voltage10', 50],
    ['rms3-log20-401', 20],
    ['log10-101', 150],
  ])('%s, where the scatter alone can’t always tell', { timeout: 120_000 }, (name, captures) => {
    expectCalibrated(measured(name, captures).summary);
  });
});

describe('a wrong declaration is told, with the level error that it causes', () => {
  test.each([
    ['log5-says-power', 40],
    ['log20-says-power', 40],
    ['log20-says-power-dwell.25', 40],
    ['log100-says-power', 20],
    ['poles4-log20-says-power-spurs5', 25],
    ['power20-says-log', 40],
  ])('%s', { timeout: 120_000 }, (name, captures) => {
    const { cell, trials, summary } = measured(name, captures);
    expect(summary.verdicts).toEqual({ [`other:${cell.fits}`]: captures });
    for (const { levelErrorDb } of trials) {
      expect(Math.abs((levelErrorDb ?? NaN) - (cell.levelErrorDb ?? NaN))).toBeLessThan(0.1);
    }
  });
});

test('strong signals in every part of the span are found', { timeout: 120_000 }, () => {
  expect(measured('power20-spurs5', 20).summary.missedSpurs).toBe(0);
});

test('a peak detector’s trace stops', { timeout: 120_000 }, () => {
  for (const { stops } of measured('peak10', 5).trials) expect(stops.length).toBeGreaterThan(0);
});
