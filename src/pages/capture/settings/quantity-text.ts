import { frequencyScale } from '../../../lib/format.ts';
import { significant } from '../../../../shared/quantities.ts';

/** A kind of quantity: the units that may be typed, and the one that a bare number is in. */
export interface Quantity {
  units: Readonly<Record<string, number>>;
  /** Unit shown for a value (null: none yet) and how much one of it is. */
  shown: (value: number | null) => { unit: string; factor: number };
}

const HERTZ = { hz: 1, k: 1e3, khz: 1e3, m: 1e6, mhz: 1e6, meg: 1e6, g: 1e9, ghz: 1e9 };
const DB = { db: 1 };

const always = (unit: string, factor = 1) => ({ shown: () => ({ unit, factor }) });

export const QUANTITIES = {
  frequency: {
    units: HERTZ,
    shown: (value) => {
      const { unit, hz } = frequencyScale(value === null || value <= 0 ? 1e3 : value);
      return { unit, factor: hz };
    },
  },
  time: { units: { s: 1, ms: 1e-3, us: 1e-6, µs: 1e-6, μs: 1e-6, ns: 1e-9, min: 60 }, ...always('ms', 1e-3) },
  decibel: { units: DB, ...always('dB') },
  density: { units: { ...DB, dbm: 1, 'dbm/hz': 1 }, ...always('dBm/Hz') },
  count: { units: { x: 1, '×': 1, sweep: 1, sweeps: 1 }, ...always('') },
  ratio: { units: { '%': 0.01 }, ...always('') },
  ohm: { units: { ohm: 1, ohms: 1, ω: 1 }, ...always('Ω') },
  kelvin: { units: { k: 1, kelvin: 1 }, ...always('K') },
} as const satisfies Record<string, Quantity>;

export type Parsed = { ok: true; value: number } | { ok: false; message: string };

const no = (message: string): Parsed => ({ ok: false, message });

/** The number in a text with a decimal point or comma; `ambiguous` where a comma could also part thousands. */
function numberIn(text: string): number | 'ambiguous' | null {
  if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(text)) return 'ambiguous';
  if (!/^[+-]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+-]?\d{1,3})?$/i.test(text)) return null;
  const value = Number(text.replace(',', '.'));
  return Number.isFinite(value) ? value : null;
}

/**
 * Reads what a person typed.
 * @param text `10k`, `10 kHz`, `1,5 MHz`, `−0.35`
 * @param quantity its units
 * @param bareFactor how much one of a bare number's unit is
 * @returns the value in the setting's own unit, or one sentence with a way out
 */
export function parseQuantity(text: string, quantity: Quantity, bareFactor: number): Parsed {
  const plain = text.replace(/[\u2212\u2013]/g, '-').replace(/[\s\u00a0]+/g, '');
  const match = /^([+-]?[\d.,]+(?:e[+-]?\d{1,3}(?![a-z]))?)(.*)$/i.exec(plain);
  const example = exampleOf(quantity);
  if (match === null) return no(`“${text.trim()}” isn’t a number. Write it like ${example}.`);
  const number = numberIn(match[1]);
  if (number === 'ambiguous') {
    const [whole, rest] = match[1].split(',');
    return no(`“${match[1]}” can be read in two ways: write ${whole}${rest} or ${whole}.${rest}.`);
  }
  if (number === null) return no(`“${match[1]}” isn’t a number. Write it like ${example}.`);
  const unit = match[2].toLowerCase();
  if (unit === '') return { ok: true, value: tidy(number * bareFactor) };
  if (!Object.hasOwn(quantity.units, unit)) {
    return no(`“${match[2]}” isn’t a unit for this. Write it like ${example}.`);
  }
  return { ok: true, value: tidy(number * quantity.units[unit]) };
}

/** Without binary dust: 25 ms is 0.025 s. */
const tidy = (value: number) => Number(value.toPrecision(14));

function exampleOf({ units }: Quantity): string {
  if ('khz' in units) return '10 kHz or 1.5M';
  if ('ms' in units) return '25 ms';
  if ('dbm/hz' in units) return '−156.5';
  if ('db' in units) return '0.35';
  if ('sweeps' in units) return '20';
  if ('%' in units) return '1.065';
  return 'ohm' in units ? '50' : '290';
}

/** A value as its field shows it, with the unit that stands inside the field. */
export function quantityText(
  value: number | null,
  quantity: Quantity,
): { text: string; unit: string; factor: number } {
  const { unit, factor } = quantity.shown(value);
  return { text: value === null ? '' : significant(value / factor, 10), unit, factor };
}
