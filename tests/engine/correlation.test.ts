import { describe, expect, it } from 'vitest';
import { effectiveIndependentPoints, predictedTau } from '../../server/engine/correlation.ts';
import { simulateCapture, simulateVideoCapture, uniformStream } from './support/noise.ts';

function tauOf(
  powerMw: Float64Array,
  mask = new Uint8Array(powerMw.length),
  filterWidthHz: number | null = null,
) {
  const residual = powerMw.map((power) => power - 1);
  return effectiveIndependentPoints(residual, mask, { spacingHz: 1, filterWidthHz });
}

/** Points per independent point behind a Gaussian filter, summed from the known correlation. */
function trueTau(spacingPerWidth: number): number {
  const sigma = 1 / 2.3548200450309493;
  let tau = 1;
  for (let lag = 1; lag < 500; lag++)
    tau += 2 * Math.exp(-((lag * spacingPerWidth) ** 2) / (4 * sigma * sigma));
  return tau;
}

describe('points per independent point', () => {
  it.each([0.05, 0.2, 0.5, 1])('are close to the truth for points %d filter widths apart', (spacing) => {
    const length = 60001;
    const powerMw = simulateCapture(
      { length, spacingPerWidth: spacing, sweeps: 1, scale: 'power' },
      uniformStream(3),
    );
    const { tau, effectivePoints, source } = tauOf(powerMw);
    expect(source).toBe('data');
    expect(Math.abs(tau / trueTau(spacing) - 1)).toBeLessThan(0.1);
    expect(effectivePoints).toBeCloseTo(length / tau, 6);
  });

  it('are unbiased within 10 % over short captures', () => {
    let sum = 0;
    const captures = 150;
    for (let seed = 1; seed <= captures; seed++) {
      const powerMw = simulateCapture(
        { length: 601, spacingPerWidth: 0.3, sweeps: 1, scale: 'power' },
        uniformStream(seed * 13),
      );
      const mean = powerMw.reduce((total, power) => total + power, 0) / powerMw.length;
      sum += tauOf(powerMw.map((power) => power / mean)).tau / captures;
    }
    expect(Math.abs(sum / trueTau(0.3) - 1)).toBeLessThan(0.1);
  });

  it('are 1 for independent points', () => {
    let sum = 0;
    for (let seed = 1; seed <= 100; seed++) {
      const powerMw = simulateCapture(
        { length: 401, spacingPerWidth: 4, sweeps: 1, scale: 'power' },
        uniformStream(seed * 17),
      );
      sum += tauOf(powerMw).tau / 100;
    }
    expect(sum).toBeLessThan(1.05);
  });

  it('see the memory of a video filter', () => {
    // Points 2 filter widths of dwell apart behind VBW = 0.03 RBW: about coth(π·0.03·2) for a one-pole filter.
    const powerMw = simulateVideoCapture(30000, 2, 0.03, 'power', uniformStream(4));
    const expected = 1 / Math.tanh(Math.PI * 0.03 * 2);
    expect(Math.abs(tauOf(powerMw).tau / expected - 1)).toBeLessThan(0.12);
  });

  it('do not change where half of the points are left out in gaps', () => {
    const length = 60001;
    const powerMw = simulateCapture(
      { length, spacingPerWidth: 0.1, sweeps: 1, scale: 'power' },
      uniformStream(5),
    );
    const mask = Uint8Array.from({ length }, (_, index) => (index % 400 < 200 ? 1 : 0));
    expect(Math.abs(tauOf(powerMw, mask).tau / trueTau(0.1) - 1)).toBeLessThan(0.12);
  });

  it('are the same by plain sums and by Fourier transform', () => {
    const powerMw = simulateCapture(
      { length: 9001, spacingPerWidth: 0.01, sweeps: 1, scale: 'power' },
      uniformStream(6),
    );
    const residual = powerMw.map((power) => power - 1);
    const mask = Uint8Array.from(residual, (_, index) => (index % 1000 < 50 ? 1 : 0));
    const { autocorrelation } = effectiveIndependentPoints(residual, mask, {
      spacingHz: 1,
      filterWidthHz: 100,
    });
    expect(autocorrelation.length).toBeGreaterThan(80);
    const steps = autocorrelation.map((rho, lag) => (lag === 0 ? 0 : autocorrelation[lag - 1] - rho));
    expect(Math.abs(steps[65] - (steps[64] + steps[66]) / 2)).toBeLessThan(0.002);
    expect(Math.abs(steps[64] - (steps[63] + steps[65]) / 2)).toBeLessThan(0.002);
  });

  it('come from the filter where fewer than 50 points are kept', () => {
    const { tau, source } = tauOf(new Float64Array(40).fill(1.1), new Uint8Array(40), 3);
    expect(source).toBe('predicted');
    expect(tau).toBeCloseTo(trueTau(1 / 3), 3);
  });
});

describe('the predicted correlation', () => {
  it('falls to 1 where every point dwells many times the inverse filter width', () => {
    expect(predictedTau({ spacingHz: 10, filterWidthHz: 1000, sweepTimeS: 10 }, 1001)).toBeCloseTo(1, 6);
  });
  it('grows with a video filter', () => {
    const bounds = { spacingHz: 1000, filterWidthHz: 1000, sweepTimeS: 1 };
    const narrow = predictedTau({ ...bounds, videoWidthHz: 50 }, 1001);
    expect(narrow).toBeGreaterThan(predictedTau(bounds, 1001) + 4);
  });
});
