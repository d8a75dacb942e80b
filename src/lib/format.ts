import { countWords, fixed } from '../../shared/quantities.ts';

export { countWords, fixed, frequencyWords, plural, significant } from '../../shared/quantities.ts';

/** Space that keeps a number and its unit on one line. */
export const NBSP = '\u00a0';

const FREQUENCY_UNITS: readonly (readonly [number, FrequencyUnit])[] = [
  [1e9, 'GHz'],
  [1e6, 'MHz'],
  [1e3, 'kHz'],
  [1, 'Hz'],
];

export type FrequencyUnit = 'GHz' | 'MHz' | 'kHz' | 'Hz';
export interface FrequencyScale {
  unit: FrequencyUnit;
  hz: number;
}

/** The unit that suits frequencies of this size, and how many Hz it has. */
export function frequencyScale(largestHz: number): FrequencyScale {
  const [hz, unit] = FREQUENCY_UNITS.find(([limit]) => Math.abs(largestHz) >= limit * 0.9999999) ?? [1, 'Hz'];
  return { unit, hz };
}

/** Decimals that tell two frequencies apart which stand `stepHz` from each other, in the given unit; at most 9. */
export function frequencyDecimals(stepHz: number, scale: FrequencyScale): number {
  if (!(stepHz > 0)) return 0;
  return Math.min(9, Math.max(0, Math.ceil(-Math.log10(stepHz / scale.hz) - 1e-9)));
}

/** A frequency as number and unit apart, with fixed decimals; the unit follows the size. */
export function frequency(hz: number, decimals = 2): { number: string; unit: FrequencyUnit } {
  const scale = frequencyScale(hz);
  return { number: fixed(hz / scale.hz, scale.unit === 'Hz' ? 0 : decimals), unit: scale.unit };
}

/** Bandwidths as a table shows them: `10 kHz`, `3.9 kHz`, at most three digits. */
export function bandwidth(hz: number): { number: string; unit: FrequencyUnit } {
  const scale = frequencyScale(hz);
  return { number: String(Number((hz / scale.hz).toPrecision(3))), unit: scale.unit };
}

/** Decimals that an expanded uncertainty in dB warrants: two digits of U, at least 1 and at most 4. */
export function decimalsFor(expandedUncertaintyDb: number | null): number {
  if (expandedUncertaintyDb === null || !(expandedUncertaintyDb > 0)) return 2;
  const leading = Math.floor(Math.log10(Number(expandedUncertaintyDb.toPrecision(2))));
  return Math.min(4, Math.max(1, 1 - leading));
}

/** A level or density with the decimals that U warrants, true minus. */
export function level(valueDb: number, expandedUncertaintyDb: number | null = null): string {
  return fixed(valueDb, decimalsFor(expandedUncertaintyDb));
}

/** An uncertainty with two digits: `0.42`, `0.083`. */
export function uncertainty(valueDb: number): string {
  return fixed(valueDb, decimalsFor(valueDb));
}

/** A correction with its sign: `+2.33`, `−40.27`, `0.00`. */
export function correction(valueDb: number, decimals = 2): string {
  return fixed(valueDb, decimals, 'always');
}

/** Shares (0 to 1) as whole percents that total 100, by largest remainder; null stays null. */
export function percents(shares: readonly (number | null)[]): (number | null)[] {
  const exact = shares.map((share) => (share === null ? 0 : share * 100));
  const whole = exact.map(Math.floor);
  const total = Math.round(exact.reduce((sum, value) => sum + value, 0));
  const byRemainder = exact
    .map((value, index) => ({ index, remainder: value - Math.floor(value) }))
    .filter(({ index }) => shares[index] !== null)
    .sort((a, b) => b.remainder - a.remainder || a.index - b.index);
  const left = Math.max(0, total - whole.reduce((sum, value) => sum + value, 0));
  for (const { index } of byRemainder.slice(0, left)) whole[index] += 1;
  return shares.map((share, index) => (share === null ? null : whole[index]));
}

/** A size in MB (10^6 bytes) or kB with fixed decimals. */
export function fileSize(bytes: number): string {
  if (bytes < 1000) return `${countWords(bytes)} B`;
  if (bytes < 1e6) return `${fixed(bytes / 1e3, 1)} kB`;
  return `${fixed(bytes / 1e6, 1)} MB`;
}
