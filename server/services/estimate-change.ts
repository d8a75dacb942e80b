import type { EngineEstimate, EstimateRequest } from '../../shared/estimate.ts';
import { frequencyWords, plural, significant } from '../../shared/quantities.ts';
import type { SettingName } from '../../shared/settings.ts';

interface Computation {
  settings: EngineEstimate['settings'];
  request: EstimateRequest;
}

type Words = [label: string, value: (value: number | string | boolean) => string];

const hz = (value: number | string | boolean) =>
  typeof value === 'number' ? frequencyWords(value) : String(value);
const unit = (name: string) => (value: number | string | boolean) =>
  `${typeof value === 'number' ? significant(value, 6) : value} ${name}`;
const plain = (value: number | string | boolean) => String(value);
const RBW_KINDS: Record<string, string> = { '3dB': '−3 dB', '6dB': '−6 dB', noise: 'noise bandwidth' };

/** How a change of each setting is told: label, then value. */
const WORDS: Record<SettingName, Words> = {
  rbwHz: ['RBW', hz],
  rbwKind: ['RBW means', (value) => RBW_KINDS[String(value)] ?? String(value)],
  filterShape: ['filter', plain],
  bandwidthRatio: ['noise bandwidth over RBW', plain],
  bandwidthRatioUncertainty: ['its uncertainty', plain],
  vbwHz: ['VBW', hz],
  detector: ['detector', plain],
  detectorScale: ['detector averages', plain],
  averagingScale: ['averaging', plain],
  sweeps: ['sweeps', plain],
  sweepTimeS: ['sweep time', unit('s')],
  attenuationDb: ['attenuation', unit('dB')],
  preamplifier: ['preamplifier', (value) => (value ? 'on' : 'off')],
  referenceLevelDbm: ['reference level', unit('dBm')],
  externalGainDb: ['external gain', unit('dB')],
  externalGainUncertaintyDb: ['gain’s uncertainty', unit('dB')],
  levelUncertaintyDb: ['level’s uncertainty', unit('dB')],
  ownNoiseDbmPerHz: ['own noise', unit('dBm/Hz')],
  ownNoiseUncertaintyDb: ['own noise’s uncertainty', unit('dB')],
  impedanceOhm: ['impedance', unit('Ω')],
  sourceTemperatureK: ['source at', unit('K')],
  startHz: ['start', hz],
  stopHz: ['stop', hz],
  centreHz: ['centre', hz],
  spanHz: ['span', hz],
  statedPoints: ['stated points', plain],
  takenAt: ['taken at', plain],
  instrument: ['instrument', plain],
};

const isSettingName = (name: string): name is SettingName => name in WORDS;

/** A value that somebody or something stated; what the engine assumed doesn't count as a change. */
function stated(
  settings: EngineEstimate['settings'],
  name: SettingName,
): number | string | boolean | undefined {
  const setting = settings[name];
  return setting === undefined || setting.origin.kind === 'assumed' ? undefined : setting.value;
}

function settingParts(before: Computation, after: Computation): string[] {
  return Object.keys(WORDS)
    .filter(isSettingName)
    .flatMap((name) => {
      const value = stated(after.settings, name);
      if (value === stated(before.settings, name)) return [];
      const [label, words] = WORDS[name];
      if (value === undefined) return [`${label} not stated`];
      return [
        name === 'sweeps' && typeof value === 'number' ? plural(value, 'sweep') : `${label} ${words(value)}`,
      ];
    });
}

function exclusionParts(before: Computation, after: Computation): string[] {
  const spans = ({ request }: Computation, action: 'exclude' | 'keep') =>
    request.exclusions
      .filter((exclusion) => exclusion.action === action)
      .map(({ fromHz, toHz, reason }) => `${fromHz}–${toHz} ${reason ?? ''}`);
  const changed = (action: 'exclude' | 'keep') =>
    spans(before, action).join() !== spans(after, action).join();
  const left = spans(after, 'exclude').length;
  const back = spans(after, 'keep').length;
  return [
    ...(changed('exclude')
      ? [left === 0 ? 'no span left out by hand' : `${plural(left, 'span')} left out`]
      : []),
    ...(changed('keep') ? [back === 0 ? 'no span put back' : `${plural(back, 'span')} put back`] : []),
  ];
}

function optionParts(before: Computation, after: Computation): string[] {
  const was = before.request.options ?? {};
  const is = after.request.options ?? {};
  const band = ({ bandFromHz, bandToHz }: typeof is) =>
    bandFromHz === undefined && bandToHz === undefined
      ? 'whole span'
      : `band ${bandFromHz === undefined ? 'start' : frequencyWords(bandFromHz, 8)} to ${bandToHz === undefined ? 'end' : frequencyWords(bandToHz, 8)}`;
  return [
    ...(band(was) === band(is) ? [] : [band(is)]),
    ...((was.spurs ?? true) === (is.spurs ?? true)
      ? []
      : [(is.spurs ?? true) ? 'spurs left out' : 'spurs left in']),
    ...((was.falseAlarm ?? 0.01) === (is.falseAlarm ?? 0.01)
      ? []
      : [`false alarm ${significant((is.falseAlarm ?? 0.01) * 100)} %`]),
  ];
}

const MOST_PARTS = 5;

/** What changed from one computation to the next, such as `Averaging log, 20 sweeps` or `2 spans left out`. */
export function changeSentence(before: Computation, after: Computation): string {
  const parts = [
    ...(before.request.traceIndex === after.request.traceIndex
      ? []
      : [`trace ${after.request.traceIndex + 1}`]),
    ...settingParts(before, after),
    ...exclusionParts(before, after),
    ...optionParts(before, after),
  ];
  if (parts.length === 0) return 'Recomputed, nothing changed';
  const told = parts.slice(0, MOST_PARTS);
  const more = parts.length - told.length;
  const sentence = [...told, ...(more > 0 ? [`${more} more`] : [])].join(', ');
  return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}
