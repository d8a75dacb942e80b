import { describe, expect, test } from 'vitest';
import { estimateDensity } from '../../server/engine/estimate.ts';
import type { FilterShape, Scale, Settings } from '../../shared/settings.ts';
import { simulateCapture } from '../support/simulator/capture.ts';

const CAPTURES = 16;

function settingsOf(filterShape: FilterShape, averagingScale: Scale): Settings {
  const origin = { kind: 'command' } as const;
  return {
    rbwHz: { value: 10_000, origin },
    rbwKind: { value: '3dB', origin },
    filterShape: { value: filterShape, origin },
    detector: { value: 'sample', origin },
    averagingScale: { value: averagingScale, origin },
    sweeps: { value: 10, origin },
  };
}

function estimates(poles: 1 | 2, signalDbm: number, averagingScale: Scale) {
  return Array.from({ length: CAPTURES }, (_, index) => {
    const { frequencyHz, levelDbm, truth } = simulateCapture({
      seed: 7000 + index,
      startHz: 69.5e6,
      stopHz: 70.5e6,
      points: 1001,
      rbwHz: 10_000,
      filter: { shape: 'poles', poles },
      mode: { kind: 'swept', dwellInRbw: 2 },
      detector: 'sample',
      averagingScale,
      sweeps: 10,
      densityDbmPerHz: -146,
      roundingDb: 0.01,
      spurs: [{ hz: 69.8e6, levelDbm: signalDbm }],
    });
    const estimate = estimateDensity({
      trace: { frequencyHz, level: levelDbm, unit: 'dBm' },
      sha256: '',
      traceIndex: 0,
      settings: settingsOf(poles === 1 ? 'poles1' : 'poles2', averagingScale),
      exclusions: [],
    });
    return { estimate, truthDbmPerHz: truth.densityDbmPerHz };
  });
}

describe('a strong signal behind a filter of slow skirts', () => {
  test.each<[1 | 2, number, Scale]>([
    [2, -61, 'power'],
    [2, -61, 'log'],
    [1, -79, 'power'],
  ])(
    'of %i poles, %i dBm, %s scale: its skirts are taken off the mean, in a line of their own',
    (poles, signalDbm, scale) => {
      const made = estimates(poles, signalDbm, scale);
      const lines = made.map(({ estimate }) => estimate.ledger.find(({ id }) => id === 'skirts'));
      expect(lines.every((line) => line !== undefined && line.valueDb < -0.02)).toBe(true);
      const errors = made.map(
        ({ estimate, truthDbmPerHz }) => (estimate.density?.dbmPerHz ?? NaN) - truthDbmPerHz,
      );
      expect(Math.abs(errors.reduce((sum, error) => sum + error, 0) / CAPTURES)).toBeLessThan(0.06);
      const covered = made.filter(
        ({ estimate: { density }, truthDbmPerHz }) =>
          density !== null && density.lowDbmPerHz <= truthDbmPerHz && truthDbmPerHz <= density.highDbmPerHz,
      );
      expect(covered.length).toBeGreaterThanOrEqual(12);
    },
  );

  test('that covers the whole floor stops the estimate from being submitted', () => {
    const [{ estimate }] = estimates(1, -61, 'power');
    expect(estimate.findings).toContainEqual(
      expect.objectContaining({ code: 'skirts-reach-floor', severity: 'stop' }),
    );
  });
});
