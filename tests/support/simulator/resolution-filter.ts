import type { Random } from './random.ts';
import { gaussianNoise, gaussianAmplitude } from './gaussian-filter.ts';
import { polesAmplitude, polesNoise } from './poles-filter.ts';
import { rectangularNoise } from './rectangular-filter.ts';

/** Shape of a resolution filter; its width is always given at -3 dB. */
export type FilterSpec = { shape: 'gaussian' } | { shape: 'poles'; poles: number } | { shape: 'rectangular' };

/** Writes `count` complex values of filtered noise into `re` and `im`. */
export type NoiseSource = (re: Float64Array, im: Float64Array, count: number) => void;

/** A record of filtered noise: time between values in units of 1/RBW is `stepInRbw * stride`. */
export interface NoiseRequest {
  random: Random;
  /** Time between steps of the filter, times RBW. */
  stepInRbw: number;
  /** Steps between the values that are handed out. */
  stride: number;
}

/**
 * White complex noise of one unit of power per RBW of bandwidth, behind the filter; a stationary record
 * from its first value on. The filter's gain at its centre is 1.
 */
export function filteredNoise(filter: FilterSpec, request: NoiseRequest): NoiseSource {
  switch (filter.shape) {
    case 'gaussian':
      return gaussianNoise(request);
    case 'poles':
      return polesNoise(filter.poles, request);
    case 'rectangular':
      return rectangularNoise(request);
  }
}

/** Amplitude behind the filter of a signal that stands `offsetInRbw` (offset / RBW) from its centre. */
export function amplitudeAt(filter: FilterSpec, offsetInRbw: number): number {
  switch (filter.shape) {
    case 'gaussian':
      return gaussianAmplitude(offsetInRbw);
    case 'poles':
      return polesAmplitude(filter.poles, offsetInRbw);
    case 'rectangular':
      return Math.abs(offsetInRbw) <= 0.5 ? 1 : 0;
  }
}
