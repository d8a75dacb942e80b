/** Words for quantities that server and client write alike. */

const trueMinus = (text: string) => text.replace('-', '\u2212');

/** A number with fixed decimals, a true minus and, where asked, always a sign; `−0.00` becomes `0.00`. */
export function fixed(value: number, decimals: number, sign: 'auto' | 'always' = 'auto'): string {
  const rounded = Number(value.toFixed(decimals));
  const text = Math.abs(rounded).toLocaleString('en-US', {
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
  });
  if (rounded < 0) return trueMinus(`-${text}`);
  return sign === 'always' && rounded > 0 ? `+${text}` : text;
}

const FREQUENCY_UNITS: [number, string][] = [
  [1e9, 'GHz'],
  [1e6, 'MHz'],
  [1e3, 'kHz'],
  [1, 'Hz'],
];

/** A number with up to `digits` significant digits and no trailing zeros. */
export function significant(value: number, digits = 4): string {
  if (value === 0 || !Number.isFinite(value)) return String(value);
  return trueMinus(String(Number(value.toPrecision(digits))));
}

/** A frequency in the unit that fits it, such as `10 kHz` or `69.75 MHz`. */
export function frequencyWords(hz: number, digits = 4): string {
  const [scale, unit] = FREQUENCY_UNITS.find(([limit]) => Math.abs(hz) >= limit * 0.9999999) ?? [1, 'Hz'];
  return `${significant(hz / scale, digits)} ${unit}`;
}

/** A count with thousands commas. */
export function countWords(count: number): string {
  return Math.round(count).toLocaleString('en-US');
}

/** `1 sweep`, `20 sweeps`. */
export function plural(count: number, one: string, many = `${one}s`): string {
  return `${Number.isInteger(count) ? countWords(count) : significant(count, 3)} ${count === 1 ? one : many}`;
}
