import { type Origin, Settings, type SettingName, SettingValues } from '../../shared/settings.ts';
import { displayText } from './display-text.ts';
import { type DecimalMark, parseLooseNumber, plainSigns } from './number-text.ts';
import { keyMeaning } from './setting-names.ts';
import {
  detectorFromText,
  filterShapeFromText,
  rbwKindFromText,
  scaleFromText,
  switchFromText,
} from './setting-words.ts';
import { frequencyUnit, levelScale, timeUnit } from './units.ts';

export type SettingValue = number | string | boolean;
export type ParsedSetting = { ok: true; value: SettingValue } | { ok: false; message: string };

export interface ValueContext {
  decimalMark?: DecimalMark | null;
  /** Unit that stands with the key or in a cell of its own. */
  unit?: string;
  impedanceOhm?: number;
}

const FREQUENCY_SHORT = new Map([
  ['k', 1e3],
  ['K', 1e3],
  ['M', 1e6],
  ['G', 1e9],
]);

const MODES =
  /[\s,;(]*\b(?:auto|automatic|man|manual|fixed|coupled|uncoupled|automatisch|manuell)\b\.?\)?\s*$/i;

/** `10 kHz (auto)` → number 10, unit `kHz`; null where there is no single number. */
export function splitQuantity(
  text: string,
  decimalMark: DecimalMark | null,
): { value: number; unit: string } | null {
  const plain = plainSigns(text)
    .replace(MODES, '')
    .replace(/^[~≈=]\s*/, '')
    .trim();
  const match = /^([+-]?[\d.,'’\s]*\d[.,]?(?:[eE][+-]?\d{1,4})?)\s*(.*)$/.exec(plain);
  if (!match) return null;
  const value = parseLooseNumber(match[1], decimalMark);
  return value === null ? null : { value, unit: match[2].trim().replace(/^[[(](.*)[\])]$/, '$1') };
}

type Reader = (text: string, context: ValueContext) => SettingValue | null;

/** Products and quotients of powers of ten without binary dust: 69.5 MHz is 69500000 Hz. */
export function scaled(value: number, factor: number): number {
  if (factor >= 1) {
    const product = value * factor;
    const tidy = Number(product.toPrecision(15));
    return Math.abs(tidy - product) <= Math.abs(product) * 4e-16 ? tidy : product;
  }
  return value / Math.round(1 / factor);
}

const quantity =
  (factorOf: (unit: string) => number | null): Reader =>
  (text, { decimalMark = null, unit = '' }) => {
    const parts = splitQuantity(text, decimalMark);
    if (!parts) return null;
    const factor = factorOf(parts.unit === '' ? unit : parts.unit);
    return factor === null ? null : scaled(parts.value, factor);
  };

const frequency = quantity((unit) => (unit === '' ? 1 : (FREQUENCY_SHORT.get(unit) ?? frequencyUnit(unit))));
const seconds = quantity((unit) => (unit === '' ? 1 : timeUnit(unit)));
const decibel = quantity((unit) => (/^(?:dB)?$/i.test(unit) ? 1 : null));
const density = quantity((unit) => (/^(?:dBm\s*\/\s*Hz|dBm\s*per\s*Hz)?$/i.test(unit) ? 1 : null));
const ratio = quantity((unit) => (unit === '' ? 1 : unit === '%' ? 0.01 : null));
const ohm = quantity((unit) =>
  /^(?:ohms?|Ω|Ω|Ohm)?$/i.test(unit) ? 1 : /^k(?:ohm|Ω|Ω)$/i.test(unit) ? 1e3 : null,
);

const kelvin: Reader = (text, { decimalMark = null, unit = '' }) => {
  const parts = splitQuantity(text, decimalMark);
  if (!parts) return null;
  const given = (parts.unit === '' ? unit : parts.unit).replace(/\s/g, '');
  if (/^(?:K|kelvin)?$/i.test(given)) return parts.value;
  if (/^(?:°C|degC|C|celsius)$/i.test(given)) return Number((parts.value + 273.15).toFixed(6));
  return null;
};

const referenceLevel: Reader = (text, { decimalMark = null, unit = '', impedanceOhm = 50 }) => {
  const parts = splitQuantity(text, decimalMark);
  if (!parts) return null;
  const given = parts.unit === '' ? unit : parts.unit;
  if (given === '') return parts.value;
  const scale = levelScale(given);
  if (!scale || scale.kind !== 'absolute') return null;
  const level = scale.toDbm(parts.value, impedanceOhm);
  return Number.isFinite(level) ? level : null;
};

const COUNT_WORDS = /^(?:x|times|averages?|avgs?|sweeps?|points?|pts|mal|fach|fois|veces|samples?)?$/i;

const count: Reader = (text, { decimalMark = null }) => {
  const plain = text.replace(/^\s*[x×]\s*/, '').replace(/^\s*(\d+)\s*(?:\/|of|von|de)\s*\d+\s*$/i, '$1');
  const grouped = /^\s*\d{1,3}(?:[.,'’ ]\d{3})+\s*$/.exec(plain);
  if (grouped) return Number(plain.replace(/\D/g, ''));
  const parts = splitQuantity(plain, decimalMark);
  return parts && COUNT_WORDS.test(parts.unit) ? parts.value : null;
};

const preamplifier: Reader = (text, context) => {
  const state = switchFromText(text);
  if (state !== null) return state;
  const gainDb = decibel(text, context);
  return typeof gainDb === 'number' ? gainDb > 0 : null;
};

const freeText: Reader = (text) => displayText(text, 200) || null;

const READERS: Record<SettingName, { read: Reader; wants: string }> = {
  rbwHz: { read: frequency, wants: 'a frequency such as 10 kHz' },
  rbwKind: {
    read: rbwKindFromText,
    wants: '3dB, 6dB or noise (an impulse bandwidth can’t be used: give the noise bandwidth)',
  },
  filterShape: {
    read: filterShapeFromText,
    wants: 'a shape such as gaussian, rectangular, 4 poles or flat top',
  },
  bandwidthRatio: { read: ratio, wants: 'a ratio between 0.1 and 10, such as 1.065' },
  bandwidthRatioUncertainty: { read: ratio, wants: 'a ratio between 0 and 1, such as 0.01' },
  vbwHz: { read: frequency, wants: 'a frequency such as 100 kHz' },
  detector: {
    read: detectorFromText,
    wants: 'sample, average (RMS), peak, negative peak, auto peak or quasi-peak',
  },
  detectorScale: { read: scaleFromText, wants: 'power, log or voltage' },
  averagingScale: { read: scaleFromText, wants: 'power (RMS), log (video) or voltage (linear)' },
  sweeps: { read: count, wants: 'a number of sweeps from 1' },
  sweepTimeS: { read: seconds, wants: 'a time such as 25 ms' },
  attenuationDb: { read: decibel, wants: 'a number of dB' },
  preamplifier: { read: preamplifier, wants: 'on or off' },
  referenceLevelDbm: { read: referenceLevel, wants: 'a level such as -20 dBm' },
  externalGainDb: { read: decibel, wants: 'a number of dB' },
  externalGainUncertaintyDb: { read: decibel, wants: 'a number of dB from 0' },
  levelUncertaintyDb: { read: decibel, wants: 'a number of dB from 0' },
  ownNoiseDbmPerHz: { read: density, wants: 'a density such as -156.5 dBm/Hz' },
  ownNoiseUncertaintyDb: { read: decibel, wants: 'a number of dB from 0' },
  impedanceOhm: { read: ohm, wants: 'an impedance such as 50 ohm' },
  sourceTemperatureK: { read: kelvin, wants: 'a temperature such as 290 K' },
  startHz: { read: frequency, wants: 'a frequency such as 69.5 MHz' },
  stopHz: { read: frequency, wants: 'a frequency such as 70.5 MHz' },
  centreHz: { read: frequency, wants: 'a frequency such as 70 MHz' },
  spanHz: { read: frequency, wants: 'a frequency such as 1 MHz' },
  statedPoints: { read: count, wants: 'a whole number of points' },
  takenAt: { read: freeText, wants: 'a date and time' },
  instrument: { read: freeText, wants: 'a name' },
};

const NAMES = new Map<string, SettingName>(
  SettingValues.keyof().options.map((name): [string, SettingName] => [name.toLowerCase(), name]),
);

function checked(name: SettingName, value: SettingValue | null, text: string): ParsedSetting {
  const { wants } = READERS[name];
  if (value !== null) {
    const result = SettingValues.safeParse({ [name]: value });
    if (result.success) return { ok: true, value };
  }
  return { ok: false, message: `“${displayText(text, 60)}” isn’t ${wants}.` };
}

/** As `parseSettingText`, with the unit that stands apart from the value and the file's decimal mark. */
export function parseSettingIn(name: SettingName, text: string, context: ValueContext): ParsedSetting {
  return checked(name, READERS[name].read(text.trim(), context), text);
}

/**
 * Reads a setting's value from text in any usual form, with the synonyms that files use.
 * @param name the setting
 * @param text `10kHz`, `1.0E+04`, `-3 dB`, `RMS`, `4-pole`, `on` …; numbers without unit are in the setting's own unit
 * @returns the value in the setting's own unit, or a sentence that says what was expected
 */
export function parseSettingText(name: SettingName, text: string): ParsedSetting {
  const exact = SettingValues.safeParse({ [name]: text.trim() });
  if (exact.success && name !== 'takenAt' && name !== 'instrument') return { ok: true, value: text.trim() };
  return parseSettingIn(name, text, {});
}

/** The setting that a key names: its own name or a synonym of the files, or null. */
function settingName(key: string): SettingName | null {
  const own = NAMES.get(key.trim().toLowerCase());
  if (own) return own;
  const meaning = keyMeaning(key);
  if (meaning === 'averaging') return 'averagingScale';
  if (meaning === null) return null;
  return NAMES.get(meaning.toLowerCase()) ?? null;
}

function typedOrText(name: SettingName, given: unknown): ParsedSetting {
  if (typeof given === 'string') return parseSettingText(name, given);
  if (typeof given === 'number' || typeof given === 'boolean') {
    const own = checked(name, given, String(given));
    return own.ok ? own : parseSettingText(name, String(given));
  }
  if (typeof given === 'object' && given !== null && 'value' in given && !Array.isArray(given))
    return typedOrText(name, given.value);
  return { ok: false, message: `This isn’t ${READERS[name].wants}.` };
}

/** Settings from checked values: an unknown name can't get in, whatever it is called. */
export function toSettings(
  values: ReadonlyMap<SettingName, { value: SettingValue; origin: Origin }>,
): Settings {
  return Settings.parse(Object.fromEntries(values));
}

/**
 * Reads settings from typed values or text, keys by their name or by a synonym; null and undefined are passed over.
 * @param texts such as `{rbwHz: 10000, detector: 'RMS', 'average type': 'Log-Pwr'}`
 * @param origin where they come from
 * @returns the settings that could be read, and a problem with its path for each that couldn't
 */
export function parseSettings(
  texts: Record<string, unknown>,
  origin: Origin,
): { settings: Settings; problems: { path: string; message: string }[] } {
  const values = new Map<SettingName, { value: SettingValue; origin: Origin }>();
  const problems: { path: string; message: string }[] = [];
  for (const [path, given] of Object.entries(texts)) {
    if (given === null || given === undefined) continue;
    const name = settingName(path);
    if (name === null) {
      problems.push({ path, message: `There is no setting called “${displayText(path, 60)}”.` });
      continue;
    }
    const parsed = typedOrText(name, given);
    if (parsed.ok) values.set(name, { value: parsed.value, origin });
    else problems.push({ path, message: parsed.message });
  }
  return { settings: toSettings(values), problems };
}
