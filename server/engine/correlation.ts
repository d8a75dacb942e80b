import FFT from 'fft.js';

/** Gaussian filter: -3 dB width over the standard deviation of its power response, 2·√(2·ln 2). */
const WIDTH_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);
const FEWEST_POINTS_FOR_DATA = 50;
const MOST_LAGS_SUMMED_DIRECTLY = 64;

export interface CorrelationBounds {
  spacingHz: number;
  /** -3 dB width of the resolution filter; null: not known, then only the data speak. */
  filterWidthHz: number | null;
  /** Time of one sweep over all points. */
  sweepTimeS?: number;
  /** Width of the one-pole video filter; absent: none, or wide open. */
  videoWidthHz?: number;
}

export interface IndependentPoints {
  /** Points per independent point, >= 1. */
  tau: number;
  /** Kept points over tau. */
  effectivePoints: number;
  /** Kept points. */
  points: number;
  source: 'data' | 'predicted';
  /** Autocorrelation of linear power at lags 0, 1, 2 … as far as it was summed. */
  autocorrelation: number[];
}

/**
 * Points per independent point behind a Gaussian resolution filter, tau = 1 + 2·Σ rho²(k).
 *
 * Two points k·spacing apart share power correlation exp(-Δf²/(4σ²)) with σ = B3/2.355 (overlap of their filters), times
 * exp(-4π²σ²·t²) where they were taken the time t apart. A one-pole video filter adds 1/(π·VBW) seconds.
 *
 * @returns tau >= 1; where the sweep time is not stated, the points are taken as simultaneous: an upper bound
 */
export function predictedTau(bounds: CorrelationBounds, points: number): number {
  if (bounds.filterWidthHz === null) return 1;
  const sigma = bounds.filterWidthHz / WIDTH_PER_SIGMA;
  const dwell = bounds.sweepTimeS === undefined ? 0 : bounds.sweepTimeS / Math.max(1, points - 1);
  const perStep = (bounds.spacingHz / (2 * sigma)) ** 2 + (2 * Math.PI * sigma * dwell) ** 2;
  let tau = 1;
  for (let lag = 1; lag < points && perStep * lag * lag < 30; lag++) {
    tau += 2 * Math.exp(-perStep * lag * lag);
  }
  if (bounds.videoWidthHz !== undefined && dwell > 0) {
    const decay = Math.exp(-2 * Math.PI * bounds.videoWidthHz * dwell);
    tau += (2 * decay) / (1 - decay);
  }
  return Math.min(tau, Math.max(1, points));
}

/**
 * Effective number of independent points for the mean of linear power, from the autocorrelation of the kept points.
 *
 * Lagged products run over pairs of kept points alone, so gaps neither add nor dilute. The sum over lags stops where a
 * lag no longer stands out of its own scatter (1.5 standard deviations), which comes before the place where pairs turn
 * negative (initial positive sequence, Geyer 1992, Statistical Science 7, 473; from memory), so white noise gives 1. Each lag carries the bias
 * -tau/n of residuals about their own mean, which is put back. The physical bound (`predictedTau` with no sweep time,
 * plus the video filter) is an upper limit for fewer than 1000 points and the answer itself below 50.
 *
 * @param residual power over floor, minus 1; one per point
 * @param mask 1 where a point is left out
 */
export function effectiveIndependentPoints(
  residual: Float64Array,
  mask: Uint8Array,
  bounds: CorrelationBounds,
): IndependentPoints {
  let points = 0;
  let sum = 0;
  for (let index = 0; index < residual.length; index++) {
    if (mask[index] === 1) continue;
    points++;
    sum += residual[index];
  }
  if (points === 0) return { tau: 1, effectivePoints: 0, points, source: 'predicted', autocorrelation: [] };
  const predicted = predictedTau(bounds, points);
  if (points < FEWEST_POINTS_FOR_DATA) {
    return {
      tau: predicted,
      effectivePoints: points / predicted,
      points,
      source: 'predicted',
      autocorrelation: [],
    };
  }
  const centred = new Float64Array(residual.length);
  const mean = sum / points;
  for (let index = 0; index < residual.length; index++) {
    if (mask[index] !== 1) centred[index] = residual[index] - mean;
  }
  const lags = lagLimit(points, bounds);
  const sums = laggedSums(centred, mask, lags);
  let { tau, autocorrelation } = integrate(sums, points, 0);
  for (let round = 0; round < 2; round++) {
    ({ tau, autocorrelation } = integrate(sums, points, tau / points));
  }
  if (points < 1000 && bounds.filterWidthHz !== null) {
    const ceiling = predictedTau({ ...bounds, sweepTimeS: undefined }, points);
    const video = predicted > ceiling ? predicted - ceiling : 0;
    tau = Math.min(tau, Math.max(1, 1.3 * ceiling + 2 * video));
  }
  return { tau, effectivePoints: points / tau, points, source: 'data', autocorrelation };
}

function lagLimit(points: number, bounds: CorrelationBounds): number {
  const quarter = Math.max(2, Math.floor(points / 4));
  if (bounds.filterWidthHz === null) return Math.min(quarter, 4096);
  const expected = predictedTau({ ...bounds, sweepTimeS: undefined }, points) + predictedTau(bounds, points);
  return Math.min(quarter, Math.max(16, Math.ceil(6 * expected)));
}

interface LaggedSums {
  lags: number;
  /** Sum of products of kept points so many points apart, and how many pairs there are. */
  at(lag: number): { product: number; pairs: number };
}

/** The first lags by plain sums, as they are asked for; all others at once by Fourier transform. */
function laggedSums(centred: Float64Array, mask: Uint8Array, lags: number): LaggedSums {
  const missing: number[] = [];
  for (let index = 0; index < mask.length; index++) if (mask[index] === 1) missing.push(index);
  const known: { product: number; pairs: number }[] = [];
  let fourier: { products: Float64Array; pairs: Float64Array } | null = null;
  return {
    lags,
    at(lag) {
      if (lag > MOST_LAGS_SUMMED_DIRECTLY) {
        fourier ??= laggedSumsByFourier(centred, mask, lags);
        return { product: fourier.products[lag], pairs: fourier.pairs[lag] };
      }
      known[lag] ??= sumAtLag(centred, mask, lag, missing);
      return known[lag];
    },
  };
}

function sumAtLag(centred: Float64Array, mask: Uint8Array, lag: number, missing: readonly number[]) {
  const end = centred.length - lag;
  let product = 0;
  for (let index = 0; index < end; index++) product += centred[index] * centred[index + lag];
  let pairs = end;
  for (const index of missing) {
    if (index < end) pairs -= 1;
    if (index >= lag && mask[index - lag] !== 1) pairs -= 1;
  }
  return { product, pairs };
}

/** Both lagged sums from one transform forth and one back: values ride on the real part, presence on the imaginary. */
function laggedSumsByFourier(centred: Float64Array, mask: Uint8Array, lags: number) {
  let size = 2;
  while (size < centred.length + lags + 1) size *= 2;
  const transform = new FFT(size);
  const input = new Float64Array(2 * size);
  for (let index = 0; index < centred.length; index++) {
    input[2 * index] = centred[index];
    input[2 * index + 1] = mask[index] === 1 ? 0 : 1;
  }
  const spectrum = new Float64Array(2 * size);
  transform.transform(spectrum, input);
  for (let bin = 0; bin < size; bin++) {
    const mirror = bin === 0 ? 0 : size - bin;
    const re = spectrum[2 * bin];
    const im = spectrum[2 * bin + 1];
    const mirrorRe = spectrum[2 * mirror];
    const mirrorIm = spectrum[2 * mirror + 1];
    const valueRe = (re + mirrorRe) / 2;
    const valueIm = (im - mirrorIm) / 2;
    const presentRe = (im + mirrorIm) / 2;
    const presentIm = (mirrorRe - re) / 2;
    input[2 * bin] = valueRe * valueRe + valueIm * valueIm;
    input[2 * bin + 1] = presentRe * presentRe + presentIm * presentIm;
  }
  transform.inverseTransform(spectrum, input);
  const products = new Float64Array(lags + 1);
  const pairs = new Float64Array(lags + 1);
  for (let lag = 0; lag <= lags; lag++) {
    products[lag] = spectrum[2 * lag];
    pairs[lag] = Math.round(spectrum[2 * lag + 1]);
  }
  return { products, pairs };
}

function integrate(sums: LaggedSums, points: number, bias: number) {
  const zero = sums.at(0);
  const variance = zero.product / zero.pairs;
  const autocorrelation = [1];
  if (!(variance > 0)) return { tau: 1, autocorrelation };
  let tau = 1;
  let spread = 1;
  for (let lag = 1; lag <= sums.lags; lag++) {
    const { product, pairs } = sums.at(lag);
    if (pairs < 0.05 * points) break;
    const rho = (product / pairs / variance + bias) / (1 + bias);
    if (!(rho > 1.5 * Math.sqrt(spread / pairs))) {
      // Half of the first lag that no longer stands out: what a smooth decline leaves below the threshold.
      if (lag > 1 && rho > 0) tau += rho;
      break;
    }
    tau += 2 * rho;
    spread += 2 * rho * rho;
    autocorrelation.push(rho);
  }
  return { tau: Math.max(1, tau), autocorrelation };
}
