import gammaln from '@stdlib/math-base-special-gammaln';
import FFT from 'fft.js';
import { logGamma } from './complex-gamma.ts';

/** Probability density of y = ln(power) at `from + i·step`; sums to 1 with the step. */
export interface LogPowerGrid {
  from: number;
  step: number;
  density: Float64Array;
  /** Shape and mean where the law is exactly a Gamma law. */
  gamma?: { shape: number; mean: number };
}

const GRID_POINTS = 2048;
const FREQUENCIES = 1024;

function tabulate(from: number, to: number, density: (y: number) => number): LogPowerGrid {
  const step = (to - from) / (GRID_POINTS - 1);
  const values = Float64Array.from({ length: GRID_POINTS }, (_, i) => Math.max(0, density(from + i * step)));
  return scaledToOne({ from, step, density: values });
}

function scaledToOne(grid: LogPowerGrid): LogPowerGrid {
  const total = grid.density.reduce((sum, value) => sum + value, 0) * grid.step;
  return { ...grid, density: grid.density.map((value) => value / total) };
}

/** Expectation of a function of y = ln(power) over a grid: the rectangle rule, spectrally exact for densities that vanish at both ends. */
export function expectation(grid: LogPowerGrid, f: (y: number) => number): number {
  let sum = 0;
  for (let i = 0; i < grid.density.length; i += 1) sum += grid.density[i] * f(grid.from + i * grid.step);
  return sum * grid.step;
}

/** Gamma law of linear power with a shape and a mean, in ln(power). */
export function gammaGrid(shape: number, mean = 1): LogPowerGrid {
  const offset = Math.log(mean);
  const spread = 1 / Math.sqrt(shape);
  const from = -Math.min(12 * spread + 40 / shape, 44 / Math.min(shape, 1.1) + 12 * spread);
  const to = Math.log(1 + 12 * spread + 45 / shape);
  const scale = shape * Math.log(shape) - gammaln(shape);
  const grid = tabulate(from + offset, to + offset, (y) =>
    Math.exp(scale + shape * (y - offset) - shape * Math.exp(y - offset)),
  );
  return { ...grid, gamma: { shape, mean } };
}

/** Logarithm of the characteristic function of y at the next of evenly spaced places, with a continuous phase. */
type NextLogCharacteristic = () => { re: number; im: number };

/** Characteristic function of a grid's y at step, 2·step, 3·step …, one place per call. */
function characteristicOf(grid: LogPowerGrid, step: number): NextLogCharacteristic {
  let t = 0;
  if (grid.gamma) {
    const { shape, mean } = grid.gamma;
    const atZero = gammaln(shape);
    const drift = Math.log(mean / shape);
    return () => {
      t += step;
      const { re, im } = logGamma(shape, t);
      return { re: re - atZero, im: im + t * drift };
    };
  }
  const centre = expectation(grid, (y) => y);
  const most = grid.density.reduce((largest, value) => Math.max(largest, value), 0);
  const kept = Array.from(grid.density.keys()).filter((i) => grid.density[i] > most * 1e-17);
  const angles = kept.map((i) => step * (grid.from + i * grid.step - centre));
  const turnRe = Float64Array.from(angles, Math.cos);
  const turnIm = Float64Array.from(angles, Math.sin);
  const pointerRe = Float64Array.from(kept, (i) => grid.density[i] * grid.step);
  const pointerIm = new Float64Array(kept.length);
  let turns = 0;
  let last = 0;
  return () => {
    t += step;
    let re = 0;
    let im = 0;
    for (let i = 0; i < pointerRe.length; i += 1) {
      const turned = pointerRe[i] * turnRe[i] - pointerIm[i] * turnIm[i];
      pointerIm[i] = pointerRe[i] * turnIm[i] + pointerIm[i] * turnRe[i];
      pointerRe[i] = turned;
      re += turned;
      im += pointerIm[i];
    }
    const phase = Math.atan2(im, re);
    if (phase - last > Math.PI) turns -= 1;
    if (phase - last < -Math.PI) turns += 1;
    last = phase;
    return { re: Math.log(Math.hypot(re, im)), im: phase + 2 * Math.PI * turns + t * centre };
  };
}

const inversion = new FFT(GRID_POINTS);

/**
 * Law of the mean of n independent values of y = ln(power), n >= 1 and not always whole: the characteristic function
 * at t/n to the power n, inverted by FFT on a grid from 16 standard deviations below to 9 above the mean.
 */
export function logMean(grid: LogPowerGrid, n: number): LogPowerGrid {
  const mean = expectation(grid, (y) => y);
  const deviation = Math.sqrt(expectation(grid, (y) => (y - mean) ** 2) / n);
  const from = mean - 16 * deviation;
  const step = (25 * deviation) / GRID_POINTS;
  const tStep = (2 * Math.PI) / (25 * deviation);
  const next = characteristicOf(grid, tStep / n);
  const amplitudes = new Float64Array(2 * GRID_POINTS);
  amplitudes[0] = 0.5;
  for (let k = 1; k <= FREQUENCIES; k += 1) {
    const { re, im } = next();
    if (n * re < -36) break;
    const size = Math.exp(n * re);
    const phase = n * im - k * tStep * from;
    amplitudes[2 * k] = size * Math.cos(phase);
    amplitudes[2 * k + 1] = size * Math.sin(phase);
  }
  const sums = new Float64Array(2 * GRID_POINTS);
  inversion.transform(sums, amplitudes);
  const density = Float64Array.from({ length: GRID_POINTS }, (_, i) =>
    Math.max(0, (sums[2 * i] * tStep) / Math.PI),
  );
  return scaledToOne({ from, step, density });
}

/** Law of the mean of n independent linear powers: exact for Gamma laws, else the Gamma law of the same mean and variance. */
export function powerMean(grid: LogPowerGrid, n: number): LogPowerGrid {
  if (grid.gamma) return gammaGrid(n * grid.gamma.shape, grid.gamma.mean);
  const mean = expectation(grid, Math.exp);
  const variance = expectation(grid, (y) => (Math.exp(y) - mean) ** 2);
  return gammaGrid((n * mean * mean) / variance, mean);
}

/**
 * Law of the squared mean of n independent voltages: Gamma law (so the voltage is a Nakagami law) with the exact mean
 * and variance of that square, from the first four cumulants of one voltage.
 */
export function voltageMean(grid: LogPowerGrid, n: number): LogPowerGrid {
  const moment = (order: number) => expectation(grid, (y) => Math.exp((order * y) / 2));
  const m1 = moment(1);
  const central = (order: number) => expectation(grid, (y) => (Math.exp(y / 2) - m1) ** order);
  const k2 = central(2) / n;
  const k3 = central(3) / n ** 2;
  const k4 = (central(4) - 3 * central(2) ** 2) / n ** 3;
  const mean = m1 * m1 + k2;
  const fourth = k4 + 4 * k3 * m1 + 3 * k2 * k2 + 6 * k2 * m1 * m1 + m1 ** 4;
  return gammaGrid((mean * mean) / (fourth - mean * mean), mean);
}

/** Law of the largest (or smallest) of n independent powers, n >= 1 and not always whole: n·F^(n-1)·f. */
export function extreme(grid: LogPowerGrid, n: number, which: 'largest' | 'smallest'): LogPowerGrid {
  const { below, above } = cumulative(grid);
  const side = which === 'largest' ? below : above;
  const density = grid.density.map(
    (value, i) => n * value * Math.exp((n - 1) * Math.log(Math.max(side[i], 1e-300))),
  );
  return scaledToOne({ from: grid.from, step: grid.step, density });
}

/**
 * Probability below and above each place of a grid, each summed from its own end so that small tails keep their digits:
 * cells by the cubic through four neighbours, h·(-f₋₁ + 13·f₀ + 13·f₁ - f₂)/24.
 */
export function cumulative({ density, step }: LogPowerGrid): { below: Float64Array; above: Float64Array } {
  const length = density.length;
  const cell = new Float64Array(length);
  for (let i = 1; i < length; i += 1) {
    const inner = 13 * (density[i - 1] + density[i]);
    const outer = (i > 1 ? density[i - 2] : 0) + (i + 1 < length ? density[i + 1] : 0);
    cell[i] = (Math.max(0, inner - outer) * step) / 24;
  }
  const below = new Float64Array(length);
  const above = new Float64Array(length);
  for (let i = 1; i < length; i += 1) below[i] = below[i - 1] + cell[i];
  for (let i = length - 2; i >= 0; i -= 1) above[i] = above[i + 1] + cell[i + 1];
  return { below, above };
}
