import type { ScaleSpec } from './spec.ts';

/** A power as the analyser carries it on a scale: mW, dB, or root of mW. */
export function toScale(scale: ScaleSpec, power: number): number {
  if (scale === 'power') return power;
  return scale === 'voltage' ? Math.sqrt(power) : 10 * Math.log10(Math.max(power, 1e-300));
}

/** The power that a value on a scale shows. */
export function fromScale(scale: ScaleSpec, value: number): number {
  if (scale === 'power') return value;
  return scale === 'voltage' ? value * value : Math.pow(10, value / 10);
}
