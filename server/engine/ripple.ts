import FFT from 'fft.js';
import { invert, multiply } from './floor-polynomial.ts';
import { binPower } from './floor-shape.ts';

const FEWEST_CYCLES = 3;
const DETREND_DEGREE = 5;
const NEIGHBOURHOOD = 48;
const MOST_BINS = 4096;

export interface Ripple {
  periodHz: number;
  /** Peak to peak. */
  depthDb: number;
  /** Probability that noise alone shows a line this strong at any of the periods searched. */
  falseAlarm: number;
  /** One minus that probability. */
  significance: number;
}

/**
 * Periodic ripple (a standing wave) in the floor, from the Fourier transform of the residuals of linear power.
 *
 * A slow trend is taken out, the rest is transformed behind a Hann window, and each line is held against the median of
 * the lines around it (over ln 2, so that slow humps and correlated points don't count as lines). The strongest line of
 * noise exceeds z with probability 1 - (1 - e^(-z))^M over M independent lines. Periods run from a third of the span to
 * four filter widths or three points.
 *
 * @param powerMw linear power per point
 * @param frequencyHz evenly spaced
 * @param mask 1 where a point is left out
 * @param falseAlarm highest probability at which a ripple is reported
 */
export function findRipple(
  powerMw: Float64Array,
  frequencyHz: Float64Array,
  mask: Uint8Array,
  filterWidthHz: number,
  falseAlarm = 0.001,
): Ripple | null {
  const bins = binPower(powerMw, frequencyHz, mask, MOST_BINS);
  const used = bins.at.length;
  if (used < 40) return null;
  const spanHz = frequencyHz[frequencyHz.length - 1] - frequencyHz[0];
  const residual = detrended(bins.at, bins.meanPower, bins.count);

  const grid = Math.min(MOST_BINS, powerMw.length);
  let size = 64;
  while (size < 2 * grid) size *= 2;
  const series = new Float64Array(2 * size);
  let windowed = 0;
  for (let bin = 0; bin < used; bin++) {
    const place = Math.min(grid - 1, Math.floor(((bins.at[bin] + 1) / 2) * grid));
    const window = (0.5 + 0.5 * Math.cos(Math.PI * bins.at[bin])) * bins.count[bin];
    series[2 * place] += window * residual[bin];
    windowed += window;
  }
  const spectrum = new Float64Array(2 * size);
  new FFT(size).transform(spectrum, series);

  const linesPerCycle = size / grid;
  const mostCycles = Math.min(grid / 3, spanHz / (4 * filterWidthHz));
  const first = Math.ceil(FEWEST_CYCLES * linesPerCycle);
  const last = Math.min(size / 2 - 1, Math.floor(mostCycles * linesPerCycle));
  if (last - first < 8 * linesPerCycle) return null;
  const power = new Float64Array(last + 2);
  for (let line = 0; line < power.length; line++) {
    power[line] = spectrum[2 * line] ** 2 + spectrum[2 * line + 1] ** 2;
  }
  const running = new Float64Array(power.length + 1);
  for (let line = 0; line < power.length; line++) running[line + 1] = running[line] + power[line];
  const meanAround = (line: number) => {
    const from = Math.max(first, line - 60);
    const to = Math.min(last + 1, line + 61);
    return (running[to] - running[from]) / (to - from);
  };
  let best = -1;
  let bestRatio = 0;
  let background = 0;
  const reach = Math.ceil(NEIGHBOURHOOD * linesPerCycle * 0.5);
  for (let line = first; line <= last; line++) {
    if (power[line] < power[line - 1] || power[line] < power[line + 1]) continue;
    if (power[line] < 2.5 * meanAround(line)) continue;
    const level = localBackground(power, line, first, last, reach, Math.ceil(3 * linesPerCycle));
    if (power[line] > bestRatio * level) {
      bestRatio = power[line] / level;
      background = level;
      best = line;
    }
  }
  if (best < 0 || !(background > 0)) return null;
  // The background is itself a median of about `NEIGHBOURHOOD` independent lines: its spread thickens the tail.
  const independentLines = (last - first + 1) / linesPerCycle;
  const tail = (1 + bestRatio / NEIGHBOURHOOD) ** -NEIGHBOURHOOD;
  const chance = -Math.expm1(2 * independentLines * Math.log1p(-tail));
  if (!(chance <= falseAlarm)) return null;
  if (!persists(bins.at, bins.count, residual, best / linesPerCycle)) return null;
  const { offset, height } = parabola(power[best - 1], power[best], power[best + 1]);
  const amplitude = Math.min(0.98, (2 * Math.sqrt(height)) / windowed);
  return {
    periodHz: (spanHz * linesPerCycle) / (best + offset),
    depthDb: 10 * Math.log10((1 + amplitude) / (1 - amplitude)),
    falseAlarm: chance,
    significance: 1 - chance,
  };
}

/**
 * Whether a line runs through the span: at least three of its quarters carry it in phase, with at least 0.08 of the
 * whole each (an even line: 0.25). A step or a bump in the floor makes lines that sit in one place.
 */
function persists(at: Float64Array, count: Float64Array, residual: Float64Array, cycles: number): boolean {
  const re = [0, 0, 0, 0];
  const im = [0, 0, 0, 0];
  for (let bin = 0; bin < at.length; bin++) {
    const quarter = Math.min(3, Math.floor(2 * (at[bin] + 1)));
    const angle = Math.PI * cycles * (at[bin] + 1);
    re[quarter] += count[bin] * residual[bin] * Math.cos(angle);
    im[quarter] += count[bin] * residual[bin] * Math.sin(angle);
  }
  const wholeRe = re.reduce((sum, part) => sum + part, 0);
  const wholeIm = im.reduce((sum, part) => sum + part, 0);
  const whole = wholeRe * wholeRe + wholeIm * wholeIm;
  return re.filter((part, quarter) => part * wholeRe + im[quarter] * wholeIm > 0.08 * whole).length >= 3;
}

/** Relative power about a polynomial in place, weighted by the points in each bin. */
function detrended(at: Float64Array, meanPower: Float64Array, count: Float64Array): Float64Array {
  const size = DETREND_DEGREE + 1;
  const normal = Array.from({ length: size }, () => new Array<number>(size).fill(0));
  const right = new Array<number>(size).fill(0);
  const chebyshev = (u: number) => {
    const basis = [1, u];
    for (let order = 2; order < size; order++) basis.push(2 * u * basis[order - 1] - basis[order - 2]);
    return basis;
  };
  const rows = Array.from(at, chebyshev);
  rows.forEach((basis, bin) => {
    for (let row = 0; row < size; row++) {
      right[row] += count[bin] * basis[row] * meanPower[bin];
      for (let column = 0; column < size; column++)
        normal[row][column] += count[bin] * basis[row] * basis[column];
    }
  });
  const coefficients = multiply(invert(normal), right);
  let mean = 0;
  let points = 0;
  for (let bin = 0; bin < at.length; bin++) {
    mean += count[bin] * meanPower[bin];
    points += count[bin];
  }
  mean /= points;
  return Float64Array.from(rows, (basis, bin) => {
    const trend = basis.reduce((sum, value, order) => sum + coefficients[order] * value, 0);
    return meanPower[bin] / Math.max(trend, mean * 0.01) - 1;
  });
}

/** Mean of exponential lines around one, from their median; the line itself is left out. */
function localBackground(
  power: Float64Array,
  line: number,
  first: number,
  last: number,
  reach: number,
  hole: number,
): number {
  const from = Math.max(first, Math.min(line - reach, last - 2 * reach));
  const to = Math.min(last, Math.max(line + reach, first + 2 * reach));
  const around: number[] = [];
  for (let index = from; index <= to; index++) {
    if (Math.abs(index - line) > hole) around.push(power[index]);
  }
  around.sort((one, other) => one - other);
  return around.length === 0 ? Infinity : around[around.length >> 1] / Math.LN2;
}

function parabola(before: number, top: number, after: number): { offset: number; height: number } {
  const curvature = before - 2 * top + after;
  if (!(curvature < 0)) return { offset: 0, height: top };
  const offset = (before - after) / (2 * curvature);
  return { offset, height: top - ((before - after) * offset) / 4 };
}
