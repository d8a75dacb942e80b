import type { FilterShape, Scale } from '../../shared/settings.ts';
import { envelopeCorrelation } from './filter-shape.ts';

/** Weights and places of Gauss-Legendre quadrature with 8 places on -1..1 (Abramowitz and Stegun, table 25.4). */
const GAUSS_LEGENDRE = [
  [0.1834346424956498, 0.362683783378362],
  [0.525532409916329, 0.3137066458778873],
  [0.7966664774136267, 0.2223810344533745],
  [0.9602898564975363, 0.1012285362903763],
] as const;

/**
 * Integral from 0 to `reach` over panels of 8 places each, on t = reach·u³: the correlation of log values falls from
 * t = 0 with infinite slope, which that substitution takes away.
 */
function integral(f: (t: number) => number, reach: number, panels: number): number {
  const half = 1 / panels / 2;
  const at = (u: number) => 3 * u * u * f(reach * u * u * u);
  let sum = 0;
  for (let panel = 0; panel < panels; panel += 1) {
    const middle = (2 * panel + 1) * half;
    for (const [place, weight] of GAUSS_LEGENDRE) {
      sum += weight * (at(middle - half * place) + at(middle + half * place));
    }
  }
  return sum * half * reach;
}

/**
 * Correlation of a noise value on a scale, from the power correlation ρ²: power ρ²; log Σ ρ^(2j)/j² over π²/6;
 * voltage (π/4)·(₂F₁(-½,-½;1;ρ²) - 1) over 1 - π/4 (Rice 1944 for the envelope, from memory).
 */
export function scaleCorrelation(scale: Scale, powerCorrelation: number): number {
  switch (scale) {
    case 'power':
      return powerCorrelation;
    case 'log':
      return dilogarithm(powerCorrelation) / (Math.PI ** 2 / 6);
    case 'voltage':
      return ((Math.PI / 4) * (hypergeometric(powerCorrelation) - 1)) / (1 - Math.PI / 4);
  }
}

/** Li₂(x) on 0..1: the series below one half, Euler's reflection above. */
function dilogarithm(x: number): number {
  if (x >= 1) return Math.PI ** 2 / 6;
  if (x > 0.5) return Math.PI ** 2 / 6 - Math.log(x) * Math.log1p(-x) - dilogarithm(1 - x);
  let sum = 0;
  let power = x;
  for (let j = 1; j < 60 && power > 1e-18; j += 1) {
    sum += power / (j * j);
    power *= x;
  }
  return sum;
}

/** ₂F₁(-½,-½;1;x) on 0..1: squares of the binomial coefficients of √(1-x); 4/π at 1. */
function hypergeometric(x: number): number {
  let sum = 1;
  let term = 1;
  for (let j = 1; j <= 400; j += 1) {
    term *= ((j - 1.5) / j) ** 2 * x;
    sum += term;
    if (term < 1e-16) return sum;
  }
  return sum + (x * term * 400) / 2;
}

/** What a filter does to noise in time: its shape and its noise bandwidth. */
export interface NoiseFilter {
  shape: FilterShape;
  noiseBandwidthHz: number;
}

const correlationAt = (filter: NoiseFilter, scale: Scale, lagS: number) =>
  scaleCorrelation(scale, envelopeCorrelation(filter.shape, filter.noiseBandwidthHz, lagS) ** 2);

/**
 * Independent values in a time T behind a filter, on a scale:
 * n = 1/[(2/T)·∫0..T (1 - t/T)·c(t) dt] (method, section 1); √2·Bn·T for a Gaussian filter, power scale and long T.
 * @param durationS time over which the detector averages, > 0.
 */
export function valuesInTime(filter: NoiseFilter, scale: Scale, durationS: number): number {
  const reachS = Math.min(durationS, 12 / filter.noiseBandwidthHz);
  const mean = integral(
    (t) => (1 - t / durationS) * correlationAt(filter, scale, t),
    reachS,
    Math.max(4, Math.ceil(8 * reachS * filter.noiseBandwidthHz)),
  );
  return Math.max(1, durationS / (2 * mean));
}

/**
 * Independent values in the memory of a one-pole video filter: n = 1/[∫0..∞ w·e^(-w·t)·c(t) dt], w = 2π·VBW (method, section 1).
 */
export function valuesInVideoFilter(filter: NoiseFilter, scale: Scale, vbwHz: number): number {
  const w = 2 * Math.PI * vbwHz;
  const reachS = Math.min(40 / w, 12 / filter.noiseBandwidthHz);
  const weighted = integral(
    (t) => w * Math.exp(-w * t) * correlationAt(filter, scale, t),
    reachS,
    Math.max(8, Math.ceil(8 * reachS * filter.noiseBandwidthHz), Math.ceil(reachS * w)),
  );
  return Math.max(1, 1 / weighted);
}
