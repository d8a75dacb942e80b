/** What a level column's numbers are. `field` and `relative` can't be turned into dBm. */
export interface LevelScale {
  /** As shown: `dBµV`. */
  label: string;
  kind: 'absolute' | 'relative' | 'field';
  /** The stored unit. */
  unit: 'dBm' | 'dBm/Hz';
  /** Linear scales take positive numbers only. */
  linear: boolean;
  /** Voltage scales need the impedance. */
  voltage: boolean;
  /** Level in dBm (or dBm/Hz) of a number on this scale at an impedance in ohm. */
  toDbm: (level: number, impedanceOhm: number) => number;
}

const decades = (value: number) => 10 * Math.log10(value);

const logarithmic = (label: string, offsetDb: number, perHz = false): LevelScale => ({
  label,
  kind: 'absolute',
  unit: perHz ? 'dBm/Hz' : 'dBm',
  linear: false,
  voltage: false,
  toDbm: (level) => level + offsetDb,
});

/** `offsetDb`: level in dB(mW·Ω) of 0 on this scale, 30 for dBV. */
const voltageDb = (label: string, offsetDb: number, perHz = false): LevelScale => ({
  ...logarithmic(label, 0, perHz),
  voltage: true,
  toDbm: (level, impedanceOhm) => level + offsetDb - decades(impedanceOhm),
});

const power = (label: string, milliwatts: number, perHz = false): LevelScale => ({
  ...logarithmic(label, 0, perHz),
  linear: true,
  toDbm: (level) => decades(level * milliwatts),
});

const volts = (label: string, voltsPerUnit: number, perHz = false): LevelScale => ({
  ...logarithmic(label, 0, perHz),
  linear: true,
  voltage: true,
  toDbm: (level, impedanceOhm) => 2 * decades(level * voltsPerUnit) + 30 - decades(impedanceOhm),
});

const unusable = (label: string, kind: 'relative' | 'field'): LevelScale => ({
  ...logarithmic(label, 0),
  kind,
});

const hundredths: LevelScale = { ...logarithmic('0.01 dBm', 0), toDbm: (level) => level / 100 };

export const DBM = logarithmic('dBm', 0);
export const HUNDREDTHS = hundredths;

const LEVELS = new Map<string, LevelScale>([
  ['dbm', DBM],
  ['dbmw', DBM],
  ['dbm/hz', logarithmic('dBm/Hz', 0, true)],
  ['dbm/1hz', logarithmic('dBm/Hz', 0, true)],
  ['dbm(1hz)', logarithmic('dBm/Hz', 0, true)],
  ['dbmhz', logarithmic('dBm/Hz', 0, true)],
  ['dbw', logarithmic('dBW', 30)],
  ['dbw/hz', logarithmic('dBW/Hz', 30, true)],
  ['dbv', voltageDb('dBV', 30)],
  ['dbmv', voltageDb('dBmV', -30)],
  ['dbuv', voltageDb('dBµV', -90)],
  ['dbv/√hz', voltageDb('dBV/√Hz', 30, true)],
  ['dbuv/√hz', voltageDb('dBµV/√Hz', -90, true)],
  ['w', power('W', 1e3)],
  ['watt', power('W', 1e3)],
  ['watts', power('W', 1e3)],
  ['mw', power('mW', 1)],
  ['uw', power('µW', 1e-3)],
  ['nw', power('nW', 1e-6)],
  ['pw', power('pW', 1e-9)],
  ['fw', power('fW', 1e-12)],
  ['w/hz', power('W/Hz', 1e3, true)],
  ['mw/hz', power('mW/Hz', 1, true)],
  ['v', volts('V', 1)],
  ['volt', volts('V', 1)],
  ['volts', volts('V', 1)],
  ['mv', volts('mV', 1e-3)],
  ['uv', volts('µV', 1e-6)],
  ['nv', volts('nV', 1e-9)],
  ['v/√hz', volts('V/√Hz', 1, true)],
  ['uv/√hz', volts('µV/√Hz', 1e-6, true)],
  ['nv/√hz', volts('nV/√Hz', 1e-9, true)],
  ['0.01dbm', hundredths],
  ['1/100dbm', hundredths],
  ['cdbm', hundredths],
  ['dbm/100', hundredths],
  ['dbm*100', hundredths],
  ['db', unusable('dB', 'relative')],
  ['dbc', unusable('dBc', 'relative')],
  ['dbr', unusable('dBr', 'relative')],
  ['dbfs', unusable('dBFS', 'relative')],
  ['db/hz', unusable('dB/Hz', 'relative')],
  ['dbc/hz', unusable('dBc/Hz', 'relative')],
  ['%', unusable('%', 'relative')],
  ['dbuv/m', unusable('dBµV/m', 'field')],
  ['dbua/m', unusable('dBµA/m', 'field')],
  ['dbua', unusable('dBµA', 'field')],
  ['v/m', unusable('V/m', 'field')],
  ['uv/m', unusable('µV/m', 'field')],
  ['dbm/m2', unusable('dBm/m²', 'field')],
]);

const FREQUENCIES = new Map<string, number>([
  ['hz', 1],
  ['hertz', 1],
  ['khz', 1e3],
  ['kilohertz', 1e3],
  ['mhz', 1e6],
  ['megahertz', 1e6],
  ['ghz', 1e9],
  ['gigahertz', 1e9],
  ['thz', 1e12],
]);

const TIMES = new Map<string, number>([
  ['s', 1],
  ['sec', 1],
  ['secs', 1],
  ['second', 1],
  ['seconds', 1],
  ['sekunden', 1],
  ['ms', 1e-3],
  ['msec', 1e-3],
  ['us', 1e-6],
  ['usec', 1e-6],
  ['ns', 1e-9],
  ['min', 60],
  ['minutes', 60],
]);

function unitKey(text: string): string {
  return text
    .toLowerCase()
    .replace(/[µμ]/g, 'u')
    .replace(/sqrt\(?hz\)?|rthz|rt\(hz\)|hz\^0\.5|hz\^\(1\/2\)/g, '√hz')
    .replace(/√\(hz\)/g, '√hz')
    .replace(/²/g, '2')
    .replace(/hz\^-1|hz-1/g, '/hz')
    .replace(/\/\//g, '/')
    .replace(/[\s"'_]/g, '')
    .replace(/rms$/, '');
}

/** Hertz per unit, or null where the text is no frequency unit. `mHz` counts as MHz: no trace is in millihertz. */
export function frequencyUnit(text: string): number | null {
  return FREQUENCIES.get(unitKey(text)) ?? null;
}

/** Seconds per unit, or null. */
export function timeUnit(text: string): number | null {
  return TIMES.get(unitKey(text)) ?? null;
}

/** The scale that a level unit names, or null. `dBm/RBW` and `dBm/10kHz` are dBm in that bandwidth. */
export function levelScale(text: string): LevelScale | null {
  const key = unitKey(text);
  return LEVELS.get(key) ?? (/^dbm\/(?:rbw|[\d.]*[kmg]?hz)$/.test(key) ? DBM : null);
}

/** Degrees, radians: columns that are no level. */
export function isAngleUnit(text: string): boolean {
  return /^(?:deg|degrees?|grad|°|rad|radians?)$/.test(unitKey(text));
}

export function isUnit(text: string): boolean {
  return (
    frequencyUnit(text) !== null || levelScale(text) !== null || timeUnit(text) !== null || isAngleUnit(text)
  );
}

export const frequencyUnitLabel = (hertzPerUnit: number) =>
  new Map([
    [1, 'Hz'],
    [1e3, 'kHz'],
    [1e6, 'MHz'],
    [1e9, 'GHz'],
    [1e12, 'THz'],
  ]).get(hertzPerUnit) ?? 'Hz';
