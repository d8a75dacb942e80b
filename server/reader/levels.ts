import type { LevelScale } from './units.ts';

const LOWEST_DBM = -400;
const HIGHEST_DBM = 400;

/**
 * Turns a column's numbers into dBm (or dBm/Hz).
 * @returns the levels; NaN where there is no number or it can't be a level: zero or negative on a linear scale, beyond ±400 dBm
 */
export function toDbm(numbers: Float64Array, scale: LevelScale, impedanceOhm: number): Float64Array {
  const level = new Float64Array(numbers.length);
  const asIs = scale.label === 'dBm' || scale.label === 'dBm/Hz' || scale.label === '0.01 dBm';
  for (let i = 0; i < numbers.length; i += 1) {
    const value = numbers[i];
    if (Number.isNaN(value)) {
      level[i] = value;
      continue;
    }
    const dbm = asIs ? value : scale.linear && value <= 0 ? Number.NaN : scale.toDbm(value, impedanceOhm);
    level[i] = dbm >= LOWEST_DBM && dbm <= HIGHEST_DBM ? dbm : Number.NaN;
  }
  return level;
}

/** Lowest and highest of the levels that are there. */
export function levelRange(level: Float64Array): { lowest: number; highest: number } {
  let lowest = Number.POSITIVE_INFINITY;
  let highest = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < level.length; i += 1) {
    const value = level[i];
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
  }
  return { lowest, highest };
}
