import type { FftWindow } from './spec.ts';

/** Cosine coefficients; Hamming, Blackman-Harris (Harris 1978) and flat top from memory. */
const COSINES: Record<Exclude<FftWindow, 'gaussian'>, number[]> = {
  rectangular: [1],
  hann: [0.5, 0.5],
  hamming: [0.54, 0.46],
  blackmanHarris: [0.35875, 0.48829, 0.14128, 0.01168],
  flatTop: [0.21557895, 0.41663158, 0.277263158, 0.083578947, 0.006947368],
};

/** Standard deviations of the Gaussian window between its centre and its end. */
const GAUSSIAN_REACH = 6;

function valueAt(window: FftWindow, position: number): number {
  if (window === 'gaussian') {
    const deviations = GAUSSIAN_REACH * position;
    return Math.exp((-deviations * deviations) / 2);
  }
  return COSINES[window].reduce((sum, factor, m) => sum + factor * Math.cos(Math.PI * m * position), 0);
}

/** Amplitude response of a window of unit length at `cycles` per length, over that at 0; midpoint rule. */
function response(window: FftWindow, cycles: number): number {
  const parts = 2000;
  let sum = 0;
  let all = 0;
  for (let i = 0; i < parts; i++) {
    const position = (2 * i + 1) / parts - 1;
    const value = valueAt(window, position);
    sum += value * Math.cos(Math.PI * cycles * position);
    all += value;
  }
  return Math.abs(sum / all);
}

/** -3 dB width of a window in cycles per length, by bisection on its response. */
function widthInCycles(window: FftWindow): number {
  let low = 0;
  let high = 8;
  while (response(window, high / 2) > Math.SQRT1_2) high *= 2;
  if (window === 'rectangular') high = 1.9;
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (response(window, middle / 2) > Math.SQRT1_2) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Taps of a window whose -3 dB width is one RBW, `perRbw` values per 1/RBW, scaled so that a CW signal on a bin keeps its level. */
export function windowOf(window: FftWindow, perRbw: number): Float64Array {
  const length = widthInCycles(window) * perRbw;
  const count = Math.max(1, Math.floor(length));
  const taps = Float64Array.from({ length: count }, (_, i) => valueAt(window, (2 * i + 1 - count) / length));
  const sum = taps.reduce((total, tap) => total + tap, 0);
  return taps.map((tap) => tap / sum);
}
