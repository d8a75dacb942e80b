import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { z } from 'zod';
import { EstimateOptions, type ExclusionRequest } from '../../shared/estimate.ts';
import type { SettingName, Settings } from '../../shared/settings.ts';
import { parseSettings, parseSettingText } from '../reader/setting-values.ts';

/** Flag of the command line → setting that it states. */
export const SETTING_FLAGS = {
  rbw: 'rbwHz',
  'rbw-kind': 'rbwKind',
  shape: 'filterShape',
  'bandwidth-ratio': 'bandwidthRatio',
  'bandwidth-ratio-uncertainty': 'bandwidthRatioUncertainty',
  vbw: 'vbwHz',
  detector: 'detector',
  'detector-scale': 'detectorScale',
  scale: 'averagingScale',
  sweeps: 'sweeps',
  'sweep-time': 'sweepTimeS',
  attenuation: 'attenuationDb',
  preamplifier: 'preamplifier',
  gain: 'externalGainDb',
  'gain-uncertainty': 'externalGainUncertaintyDb',
  'level-uncertainty': 'levelUncertaintyDb',
  'own-noise': 'ownNoiseDbmPerHz',
  'own-noise-uncertainty': 'ownNoiseUncertaintyDb',
  impedance: 'impedanceOhm',
  'source-temperature': 'sourceTemperatureK',
} as const satisfies Record<string, SettingName>;

export interface EstimateFlags {
  files: string[];
  settings: Settings;
  traceIndex: number;
  exclusions: ExclusionRequest[];
  options: Partial<EstimateOptions>;
}

/** What is wrong with the command line, as a sentence. */
export class UsageError extends Error {}

const HELP_FLAGS = Object.keys(SETTING_FLAGS)
  .map((flag) => `[--${flag} …]`)
  .join(' ');

export const USAGE = `npm run -s estimate -- ${HELP_FLAGS} [--settings file.json] [--trace 0] [--exclude 69.9MHz..70.1MHz]… [--false-alarm 0.01] FILE…
Prints one estimate per file as a JSON line. Flags win over what a file says. Negative values: --gain=-3dB.`;

const SettingsFile = z.record(z.string(), z.unknown());

function settingsFromFile(path: string): Settings {
  let texts: unknown;
  try {
    texts = JSON.parse(readFileSync(path, 'utf8'));
  } catch (error) {
    throw new UsageError(
      `The settings file ${path} can't be read as JSON: ${error instanceof Error ? error.message : error}`,
    );
  }
  const parsed = SettingsFile.safeParse(texts);
  if (!parsed.success)
    throw new UsageError(`The settings file ${path} must hold one JSON object, such as {"rbwHz": 10000}.`);
  return checkedSettings(parsed.data, path);
}

function checkedSettings(texts: Record<string, unknown>, where: string): Settings {
  const { settings, problems } = parseSettings(texts, { kind: 'command' });
  const [first] = problems;
  if (first) throw new UsageError(`${where}: ${first.path}: ${first.message}`);
  return settings;
}

function frequency(text: string): number {
  const parsed = parseSettingText('startHz', text);
  if (!parsed.ok || typeof parsed.value !== 'number') {
    throw new UsageError(`--exclude takes two frequencies such as 69.9MHz..70.1MHz; "${text}" isn't one.`);
  }
  return parsed.value;
}

function exclusion(text: string): ExclusionRequest {
  const [from, to, ...rest] = text.split('..');
  if (from === undefined || to === undefined || rest.length > 0) {
    throw new UsageError(`--exclude takes two frequencies such as 69.9MHz..70.1MHz, not "${text}".`);
  }
  return { fromHz: frequency(from), toHz: frequency(to), action: 'exclude' };
}

/**
 * Reads the arguments of the command line.
 * @throws UsageError with a sentence that says what is wrong.
 */
export function estimateFlags(args: string[]): EstimateFlags {
  const textFlag = { type: 'string' } as const;
  const settingFlags = Object.fromEntries(Object.keys(SETTING_FLAGS).map((flag) => [flag, textFlag]));
  let parsed;
  try {
    parsed = parseArgs({
      args,
      allowPositionals: true,
      options: {
        ...settingFlags,
        settings: textFlag,
        trace: textFlag,
        'false-alarm': textFlag,
        exclude: { type: 'string', multiple: true },
      },
    });
  } catch (error) {
    throw new UsageError(error instanceof Error ? error.message : String(error));
  }
  const { values, positionals } = parsed;
  if (positionals.length === 0) throw new UsageError('Name at least one trace file.');
  const texts = Object.fromEntries(
    Object.entries(SETTING_FLAGS).flatMap(([flag, name]) => {
      const text = Object.entries(values).find(([key]) => key === flag)?.[1];
      return text === undefined ? [] : [[name, text]];
    }),
  );
  const traceIndex = z.coerce
    .number()
    .int()
    .min(0)
    .safeParse(values.trace ?? '0');
  if (!traceIndex.success)
    throw new UsageError(`--trace takes the number of a trace from 0, not "${values.trace}".`);
  const options = EstimateOptions.partial().safeParse(
    values['false-alarm'] === undefined ? {} : { falseAlarm: Number(values['false-alarm']) },
  );
  if (!options.success) throw new UsageError('--false-alarm takes a probability between 0 and 0.5.');
  const fromFile = values.settings === undefined ? {} : settingsFromFile(values.settings);
  return {
    files: positionals,
    settings: { ...fromFile, ...checkedSettings(texts, 'command line') },
    traceIndex: traceIndex.data,
    exclusions: (values.exclude ?? []).map(exclusion),
    options: values['false-alarm'] === undefined ? {} : { falseAlarm: options.data.falseAlarm },
  };
}
