import gammaln from '@stdlib/math-base-special-gammaln';
import type { FilterShape } from '../../shared/settings.ts';
import { powerToDb } from './units.ts';

/**
 * Cosine coefficients of the windows of FFT analysers, w = a0 - a1·cos + a2·cos2 - …
 * Harris, Proc. IEEE 66, 51-83 (1978), from memory; flat top: the five-term window of Heinzel et al. 2002 tables, from memory.
 */
const WINDOWS = {
  fftRectangular: [1],
  fftHann: [0.5, 0.5],
  fftHamming: [0.54, 0.46],
  fftBlackman: [0.42, 0.5, 0.08],
  fftBlackmanHarris: [0.35875, 0.48829, 0.14128, 0.01168],
  fftFlatTop: [0.21557895, 0.41663158, 0.277263158, 0.083578947, 0.006947368],
} as const;

type WindowShape = keyof typeof WINDOWS;

const POLES = { poles1: 1, poles2: 2, poles3: 3, poles4: 4, poles5: 5 } as const;

const isWindow = (shape: FilterShape): shape is WindowShape => shape in WINDOWS;
const isPoles = (shape: FilterShape): shape is keyof typeof POLES => shape in POLES;

/** Number of synchronously tuned poles, or null for another shape. */
export function poleCount(shape: FilterShape): number | null {
  return isPoles(shape) ? POLES[shape] : null;
}

/** Power response of a window at an offset in bins, 1 at the centre: its transform from the cosine terms. */
function windowResponse(coefficients: readonly number[], bins: number): number {
  const sinc = (x: number) => (Math.abs(x) < 1e-9 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x));
  const amplitude = coefficients.reduce(
    (sum, a, k) => sum + (k === 0 ? a * sinc(bins) : (a / 2) * (sinc(bins - k) + sinc(bins + k))),
    0,
  );
  return (amplitude / coefficients[0]) ** 2;
}

/** Noise bandwidth of a window in bins, 1/T: Σ of the squared terms over the squared mean. */
function windowNoiseBins(coefficients: readonly number[]): number {
  return coefficients.reduce((sum, a, k) => sum + (k === 0 ? a * a : (a * a) / 2), 0) / coefficients[0] ** 2;
}

/** Full width where a falling response reaches a power ratio, by bisection. */
function widthAt(response: (offset: number) => number, ratio: number, upper: number): number {
  let low = 0;
  let high = upper;
  for (let i = 0; i < 60; i += 1) {
    const middle = (low + high) / 2;
    if (response(middle) > ratio) low = middle;
    else high = middle;
  }
  return low + high;
}

/** Noise bandwidth, -3 dB and -6 dB (half power, half voltage) widths of a shape, in one common unit. */
export interface ShapeWidths {
  noise: number;
  threeDb: number;
  sixDb: number;
}

/**
 * Widths of a filter shape up to a common factor.
 * Gaussian: √(π/(4·ln 2)); n synchronous poles 1/(1+x²)^n: √π·Γ(n-1/2)/Γ(n) against 2·√(2^(1/n)-1); windows from their terms.
 */
export function shapeWidths(shape: FilterShape): ShapeWidths {
  const poles = poleCount(shape);
  if (poles !== null) {
    return {
      noise: Math.sqrt(Math.PI) * Math.exp(gammaln(poles - 0.5) - gammaln(poles)),
      threeDb: 2 * Math.sqrt(2 ** (1 / poles) - 1),
      sixDb: 2 * Math.sqrt(4 ** (1 / poles) - 1),
    };
  }
  if (isWindow(shape)) {
    const coefficients = WINDOWS[shape];
    const response = (bins: number) => windowResponse(coefficients, bins);
    const firstNull = Math.max(1, coefficients.length);
    return {
      noise: windowNoiseBins(coefficients),
      threeDb: widthAt(response, 0.5, firstNull),
      sixDb: widthAt(response, 0.25, firstNull),
    };
  }
  if (shape === 'rectangular') return { noise: 1, threeDb: 1, sixDb: 1 };
  return { noise: Math.sqrt(Math.PI / (4 * Math.LN2)), threeDb: 1, sixDb: Math.SQRT2 };
}

/**
 * Power response of a filter in dB at an offset from its centre, 0 at the centre.
 * Windows: the main lobe, and beyond it the envelope of the side lobes, so that nulls don't count as reach.
 * @param threeDbWidthHz full width at half power.
 */
export function filterResponseDb(shape: FilterShape, threeDbWidthHz: number, offsetHz: number): number {
  const x = Math.abs(offsetHz) / threeDbWidthHz;
  const poles = poleCount(shape);
  if (poles !== null) return -poles * powerToDb(1 + (2 ** (1 / poles) - 1) * (2 * x) ** 2);
  if (isWindow(shape)) {
    const coefficients = WINDOWS[shape];
    const bins = x * shapeWidths(shape).threeDb;
    const firstNull = coefficients.length;
    const at =
      bins < firstNull - 0.3 ? windowResponse(coefficients, bins) : sideLobeEnvelope(coefficients, bins);
    return powerToDb(Math.max(at, 1e-30));
  }
  if (shape === 'rectangular') return x <= 0.5 ? 0 : -300;
  return -powerToDb(2) * (2 * x) ** 2;
}

/** Largest response within one bin either side. */
function sideLobeEnvelope(coefficients: readonly number[], bins: number): number {
  let largest = 0;
  for (let step = 0; step <= 8; step += 1) {
    largest = Math.max(largest, windowResponse(coefficients, bins + step / 8));
  }
  return largest;
}

/** Polynomial p of the correlation e^(-x)·p(x) of n synchronous poles: coefficients from the modified Bessel function of order n-1/2. */
function polesCorrelation(poles: number, x: number): number {
  let sum = 0;
  let coefficient = 1;
  const order = poles - 1;
  for (let k = 0; k <= order; k += 1) {
    if (k > 0) coefficient *= (2 * (order - k + 1)) / (k * (2 * order - k + 1));
    sum += coefficient * x ** k;
  }
  return Math.exp(-x) * sum;
}

/**
 * Correlation ρ of the complex envelope of noise behind a filter at a time lag: the transform of the power response
 * over its area. The power of the envelope correlates as ρ².
 * Windows are taken as Gaussian of the same noise bandwidth.
 * @param noiseBandwidthHz width of the rectangle of the same area.
 */
export function envelopeCorrelation(shape: FilterShape, noiseBandwidthHz: number, lagS: number): number {
  const poles = poleCount(shape);
  if (poles !== null) {
    const radPerS = (2 * Math.PI * noiseBandwidthHz) / shapeWidths(shape).noise;
    return polesCorrelation(poles, radPerS * Math.abs(lagS));
  }
  if (shape === 'rectangular') {
    const x = Math.PI * noiseBandwidthHz * lagS;
    return Math.abs(x) < 1e-9 ? 1 : Math.sin(x) / x;
  }
  return Math.exp(-Math.PI * (noiseBandwidthHz * lagS) ** 2);
}
