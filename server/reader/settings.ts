import type { ReaderProblem } from '../../shared/capture.ts';
import type { Origin, SettingName, Settings } from '../../shared/settings.ts';
import { displayText } from './display-text.ts';
import { type DecimalMark, isMissing } from './number-text.ts';
import type { Entry } from './preamble-entries.ts';
import { problem } from './problems.ts';
import { keyMeaning } from './setting-names.ts';
import { parseSettingIn, type SettingValue, splitQuantity, toSettings } from './setting-values.ts';
import { filterShapeFromText, rbwKindFromText, scaleFromText, switchFromText } from './setting-words.ts';
import { frequencyUnit, levelScale } from './units.ts';

type Stated = Map<SettingName, { value: SettingValue; origin: Origin; line: number }>;

/** What the preamble states. */
export interface PreambleSettings {
  settings: Settings;
  /** By the number of the trace, from 1. */
  perTrace: Map<number, Settings>;
  problems: ReaderProblem[];
  levelUnit: { text: string; line: number } | null;
  frequencyUnit: { text: string; line: number } | null;
  stepHz: number | null;
  traceName: string | null;
  zeroSpan: boolean;
}

const LABELS = new Map<SettingName, string>([
  ['rbwHz', 'RBW'],
  ['rbwKind', 'kind of RBW'],
  ['filterShape', 'filter shape'],
  ['vbwHz', 'VBW'],
  ['detector', 'detector'],
  ['detectorScale', 'detector scale'],
  ['averagingScale', 'averaging scale'],
  ['sweeps', 'number of sweeps'],
  ['sweepTimeS', 'sweep time'],
  ['attenuationDb', 'attenuation'],
  ['preamplifier', 'preamplifier'],
  ['referenceLevelDbm', 'reference level'],
  ['externalGainDb', 'external gain'],
  ['impedanceOhm', 'impedance'],
  ['startHz', 'start frequency'],
  ['stopHz', 'stop frequency'],
  ['centreHz', 'centre frequency'],
  ['spanHz', 'span'],
  ['statedPoints', 'number of points'],
]);

/** A setting's name in a sentence. */
export const settingLabel = (name: SettingName) => LABELS.get(name) ?? name;

/** Gathers settings from entries; the first statement of a setting counts, a later one that differs is told. */
class Gathering {
  readonly shared: Stated = new Map();
  readonly traces = new Map<number, Stated>();
  readonly problems: ReaderProblem[] = [];
  impedanceOhm = 50;

  constructor(
    private readonly decimalMark: DecimalMark,
    private readonly traceCount: number,
  ) {}

  private target(trace: number | null): Stated {
    if (trace === null) return this.shared;
    const own = this.traces.get(trace) ?? new Map();
    this.traces.set(trace, own);
    return own;
  }

  set(name: SettingName, value: SettingValue, entry: Entry, trace: number | null): void {
    const target = this.target(trace);
    const earlier = target.get(name);
    if (earlier && earlier.value !== value) {
      this.problems.push(
        problem(
          'settingStatedTwice',
          'caution',
          `The ${settingLabel(name)} is stated twice: ${earlier.value} in line ${earlier.line}, ${value} in line ${entry.line}; the first counts.`,
          'Check which one belongs to this trace and correct the setting.',
          entry.line,
        ),
      );
      return;
    }
    if (!earlier)
      target.set(name, {
        value,
        origin: { kind: 'file', line: entry.line, text: entry.text },
        line: entry.line,
      });
  }

  notUnderstood(what: string, entry: Entry, message: string): void {
    this.problems.push(
      problem(
        'settingNotUnderstood',
        'caution',
        `Line ${entry.line} (“${displayText(entry.text, 80)}”) seems to state the ${what}, but ${message.charAt(0).toLowerCase()}${message.slice(1)}`,
        'Enter the setting by hand.',
        entry.line,
      ),
    );
  }

  /** One value for all traces, or one per trace where there are as many values as traces. */
  read(name: SettingName, entry: Entry): void {
    const perTrace =
      entry.values.length > 1 && entry.values.length === this.traceCount && entry.trace === null;
    const values = perTrace ? entry.values : entry.values.slice(0, 1);
    if (perTrace && new Set(values).size === 1) this.readOne(name, entry, values[0], null);
    else values.forEach((text, index) => this.readOne(name, entry, text, perTrace ? index + 1 : entry.trace));
  }

  readOne(name: SettingName, entry: Entry, text: string, trace: number | null): void {
    if (isUnset(text)) return;
    const { quantity, kind } =
      name === 'rbwHz' ? withoutKind(text, entry.unit) : { quantity: text, kind: null };
    const unit = kind !== null && rbwKindFromText(entry.unit) ? '' : entry.unit;
    const parsed = parseSettingIn(name, quantity, {
      decimalMark: this.decimalMark,
      unit,
      impedanceOhm: this.impedanceOhm,
    });
    if (!parsed.ok) {
      this.notUnderstood(settingLabel(name), entry, parsed.message);
      return;
    }
    this.set(name, parsed.value, entry, trace);
    if (kind) this.set('rbwKind', kind, entry, trace);
    if (name === 'detector' && parsed.value === 'average') {
      const scale = scaleFromText(/\(([^)]*)\)/.exec(text)?.[1] ?? '');
      if (scale) this.set('detectorScale', scale, entry, trace);
    }
  }
}

/** `10 kHz (-3 dB)` → `10 kHz` and 3dB; the kind may also stand with the key: `RBW (-6 dB)`. */
function withoutKind(
  text: string,
  unit: string,
): { quantity: string; kind: ReturnType<typeof rbwKindFromText> } {
  const inside = /[\s,]*[[(]?\s*([-−]?\s*[36](?:[.,]0+)?\s*dB|ENBW|noise)\s*[\])]?\s*$/i.exec(text);
  if (inside && inside.index > 0)
    return { quantity: text.slice(0, inside.index).trim(), kind: rbwKindFromText(inside[1]) };
  return { quantity: text, kind: /dB|noise|enbw/i.test(unit) ? rbwKindFromText(unit) : null };
}

const isUnset = (text: string) =>
  isMissing(text) || /^(?:not set|unset|not stated|unknown|unbekannt|-+|(?:-\s*)+)$/i.test(text);

function readAveraging(gathering: Gathering, entry: Entry): void {
  const perTrace = entry.values.length > 1;
  const read = (text: string, trace: number | null) => {
    if (isUnset(text) && !/^(?:none|off)$/i.test(text.trim())) return;
    const state = /^\s*\d+\s*$/.test(text) ? null : switchFromText(text);
    if (state === false) {
      gathering.set('sweeps', 1, entry, trace);
      return;
    }
    if (state === true) return;
    const number = /(?:^|[\s,;(x×])(\d{1,6})\s*(?:x|times|sweeps?|avgs?|averages?|mal|\))?\s*$/i.exec(text);
    const words = number ? text.slice(0, number.index) : text;
    if (number) gathering.readOne('sweeps', entry, number[1], trace);
    const scale = scaleFromText(words);
    if (scale) gathering.set('averagingScale', scale, entry, trace);
    else if (!number || !/^\W*(?:on|avg|average|sweeps?|exp\w*|moving|block|linear)?\W*$/i.test(words))
      gathering.notUnderstood(
        'averaging',
        entry,
        `“${displayText(text, 60)}” isn’t power (RMS), log (video), voltage (linear) or a number of sweeps.`,
      );
  };
  if (perTrace) {
    const [first, second] = entry.values;
    if (/^\d+$/.test(second) && entry.values.length === 2) read(`${first} ${second}`, entry.trace);
    else read(first, entry.trace);
  } else read(entry.values[0] ?? '', entry.trace);
}

function readFilter(gathering: Gathering, entry: Entry): void {
  const [text = ''] = entry.values;
  if (isUnset(text)) return;
  const shape = filterShapeFromText(text);
  const kind = rbwKindFromText(text);
  const frequency = splitQuantity(text, null);
  if (shape) gathering.set('filterShape', shape, entry, entry.trace);
  if (kind) gathering.set('rbwKind', kind, entry, entry.trace);
  else if (!shape && frequency && (frequencyUnit(frequency.unit) !== null || entry.unit !== ''))
    gathering.readOne('rbwHz', entry, text, entry.trace);
  else if (!shape && keyMeaning(entry.key) === 'rbwFilter' && /rbw|res/i.test(entry.key))
    gathering.notUnderstood(
      'filter',
      entry,
      `“${displayText(text, 60)}” isn’t a known shape, kind or bandwidth.`,
    );
}

function readLevelOffset(gathering: Gathering, entry: Entry): void {
  const offset = splitQuantity(entry.values[0] ?? '', null);
  if (!offset || offset.value === 0) return;
  gathering.problems.push(
    problem(
      'levelOffset',
      'caution',
      `The file states a level offset of ${offset.value} dB in line ${entry.line}; its levels already contain it.`,
      'Don’t enter the same gain or loss again as external gain.',
      entry.line,
    ),
  );
}

function readTransducer(gathering: Gathering, entry: Entry): void {
  const [text = ''] = entry.values;
  if (isUnset(text) || switchFromText(text) === false) return;
  gathering.problems.push(
    problem(
      'transducer',
      'caution',
      `The file states a correction (“${displayText(entry.text, 80)}”) in line ${entry.line}; its levels may already contain it.`,
      'Check whether the levels still are what stood at the analyser’s input.',
      entry.line,
    ),
  );
}

function readLoss(gathering: Gathering, entry: Entry): void {
  const [text = ''] = entry.values;
  if (isUnset(text)) return;
  const parsed = parseSettingIn('externalGainDb', text, { unit: entry.unit });
  if (parsed.ok && typeof parsed.value === 'number')
    gathering.set('externalGainDb', parsed.value === 0 ? 0 : -parsed.value, entry, entry.trace);
  else if (!parsed.ok) gathering.notUnderstood('external loss', entry, parsed.message);
}

/** Noise bandwidth beside an RBW gives the ratio; alone it is an RBW of the kind noise. */
function settleNoiseBandwidth(gathering: Gathering, entry: Entry, decimalMark: DecimalMark): void {
  const rbw = gathering.shared.get('rbwHz');
  const parsed = parseSettingIn('vbwHz', entry.values[0] ?? '', { decimalMark, unit: entry.unit });
  if (!parsed.ok || typeof parsed.value !== 'number') {
    if (!parsed.ok && !isUnset(entry.values[0] ?? ''))
      gathering.notUnderstood('noise bandwidth', entry, parsed.message);
    return;
  }
  if (rbw && typeof rbw.value === 'number')
    gathering.set('bandwidthRatio', parsed.value / rbw.value, entry, null);
  else {
    gathering.set('rbwHz', parsed.value, entry, null);
    gathering.set('rbwKind', 'noise', entry, null);
  }
}

function settleWeak(gathering: Gathering, entry: Entry, name: 'rbwHz' | 'sweeps'): void {
  if (gathering.shared.has(name) || isUnset(entry.values[0] ?? '')) return;
  const before = gathering.shared.size;
  gathering.read(name, entry);
  if (gathering.shared.size > before)
    gathering.problems.push(
      problem(
        'weakKey',
        'caution',
        `“${displayText(entry.key, 40)}” in line ${entry.line} is taken as the ${settingLabel(name)}.`,
        'Correct the setting if it means something else.',
        entry.line,
      ),
    );
}

/**
 * Settings from the statements of a preamble, each with its line.
 * @param stated the statements in the order of the file
 * @param traceCount number of level columns, to tell one value per trace from a value with its unit
 */
export function gatherSettings(
  stated: Entry[],
  decimalMark: DecimalMark,
  traceCount: number,
): PreambleSettings {
  const gathering = new Gathering(decimalMark, traceCount);
  const numbers = new Set(stated.flatMap(({ trace }) => (trace === null ? [] : [trace])));
  const single = traceCount === 1 && numbers.size === 1;
  const entries = single ? stated.map((entry) => ({ ...entry, trace: null })) : stated;
  const late: (() => void)[] = [];
  const dates: Entry[] = [];
  let levelUnit: PreambleSettings['levelUnit'] = null;
  let axisUnit: PreambleSettings['frequencyUnit'] = null;
  let stepHz: number | null = null;
  let traceName: string | null = null;
  const zeroSpan = { stated: false };
  for (const entry of entries.filter(({ key }) => keyMeaning(key) === 'impedanceOhm')) {
    const parsed = parseSettingIn('impedanceOhm', entry.values[0] ?? '', { decimalMark, unit: entry.unit });
    if (parsed.ok && typeof parsed.value === 'number') gathering.impedanceOhm = parsed.value;
  }
  for (const entry of entries) {
    const meaning = keyMeaning(entry.key) ?? kindKey(entry);
    const [text = ''] = entry.values;
    switch (meaning) {
      case null:
      case 'ignored':
      case 'traceMode':
      case 'sweepType':
        break;
      case 'averaging':
        readAveraging(gathering, entry);
        break;
      case 'averagingState':
        if (switchFromText(text) === false) late.push(() => settleOff(gathering, entry));
        break;
      case 'rbwFilter':
        readFilter(gathering, entry);
        break;
      case 'rbwKind':
        if (rbwKindFromText(text) ?? isUnset(text)) gathering.read('rbwKind', entry);
        else if (frequencyUnit(splitQuantity(text, decimalMark)?.unit ?? '') !== null)
          gathering.read('rbwHz', entry);
        else readFilter(gathering, entry);
        break;
      case 'noiseBandwidth':
        late.push(() => settleNoiseBandwidth(gathering, entry, decimalMark));
        break;
      case 'weakRbw':
        late.push(() => settleWeak(gathering, entry, 'rbwHz'));
        break;
      case 'weakSweeps':
        late.push(() => settleWeak(gathering, entry, 'sweeps'));
        break;
      case 'loss':
        readLoss(gathering, entry);
        break;
      case 'levelOffset':
        readLevelOffset(gathering, entry);
        break;
      case 'transducer':
        readTransducer(gathering, entry);
        break;
      case 'levelUnit':
        if (levelScale(text)) levelUnit ??= { text: displayText(text, 20), line: entry.line };
        else if (frequencyUnit(text) !== null) axisUnit ??= { text, line: entry.line };
        break;
      case 'frequencyUnit':
        if (frequencyUnit(text) !== null) axisUnit ??= { text, line: entry.line };
        break;
      case 'step': {
        const parsed = parseSettingIn('startHz', text, { decimalMark, unit: entry.unit });
        if (parsed.ok && typeof parsed.value === 'number' && parsed.value > 0) stepHz ??= parsed.value;
        break;
      }
      case 'date':
      case 'time':
        dates.push(entry);
        break;
      case 'traceName':
        if (!/^\d*$/.test(text)) traceName ??= displayText(text, 60);
        break;
      case 'attenuationDb':
        if (!/^\s*[\d.,]+\s*[x×]\s*$/i.test(`${text} ${entry.unit} ${entry.values[1] ?? ''}`))
          gathering.read(meaning, entry);
        break;
      case 'spanHz':
        if (/^\s*zero/i.test(text) || splitQuantity(text, decimalMark)?.value === 0) zeroSpan.stated = true;
        else gathering.read(meaning, entry);
        break;
      case 'sweeps':
        if (/^\s*(?:0+|off|none)\s*$/i.test(text)) late.push(() => settleOff(gathering, entry));
        else gathering.read(meaning, entry);
        break;
      case 'statedPoints':
      case 'instrument':
      case 'takenAt':
        if (meaning === 'statedPoints' && !/^\s*[\d.,'’ ]+\s*\D{0,8}$/.test(text)) break;
        gathering.readOne(meaning, entry, meaning === 'statedPoints' ? text : entry.values.join(' '), null);
        break;
      default:
        gathering.read(meaning, entry);
    }
  }
  for (const settle of late) settle();
  settleDate(gathering, dates);
  return {
    settings: toSettings(gathering.shared),
    perTrace: new Map([...gathering.traces].map(([trace, stated]) => [trace, toSettings(stated)])),
    problems: gathering.problems,
    levelUnit,
    frequencyUnit: axisUnit,
    stepHz,
    traceName,
    zeroSpan: zeroSpan.stated,
  };
}

/** `RBW 3dB`, `-6 dB RBW`: the kind within the key. */
function kindKey(entry: Entry): 'rbwHz' | null {
  const kind = /[-−]?\s*[36]\s*dB/i.exec(entry.key);
  if (!kind || keyMeaning(entry.key.replace(kind[0], ' ')) !== 'rbwHz') return null;
  entry.values = [`${entry.values[0] ?? ''} ${entry.unit} (${kind[0]})`];
  entry.unit = '';
  return 'rbwHz';
}

function settleOff(gathering: Gathering, entry: Entry): void {
  if (!gathering.shared.has('sweeps')) gathering.set('sweeps', 1, entry, null);
}

function settleDate(gathering: Gathering, dates: Entry[]): void {
  const [first] = dates;
  if (!first || gathering.shared.has('takenAt')) return;
  const time = dates.find(
    (entry) => keyMeaning(entry.key) === 'time' && /\d{1,2}:\d{2}/.test(entry.values.join(' ')),
  );
  const date = dates.find((entry) => keyMeaning(entry.key) === 'date');
  const parts = [date, time].flatMap((entry) =>
    entry ? [entry.values.filter((cell) => cell !== '').join(' ')] : [],
  );
  const text = displayText(parts.join(' '), 200);
  const from = date ?? time;
  if (from && text !== '') gathering.set('takenAt', text, from, null);
}
