import type { SettingName, Settings, SettingValues } from '../../shared/settings.ts';

/** What the engine works with: settings as given, plus what it had to assume, each with its origin. */
export interface EffectiveSettings {
  settings: Settings;
  values: SettingValues;
  assumed: ReadonlySet<SettingName>;
}

type Assumption = {
  [Name in SettingName]: { name: Name; value: NonNullable<SettingValues[Name]>; reason: string };
}[SettingName];

/** The values of settings without their origins. */
export function settingValues(settings: Settings): SettingValues {
  return Object.fromEntries(
    Object.entries(settings).flatMap(([name, setting]) =>
      setting === undefined ? [] : [[name, setting.value]],
    ),
  );
}

function put(settings: Settings, assumption: Assumption): Settings {
  const { name, value, reason } = assumption;
  return { ...settings, [name]: { value, origin: { kind: 'assumed', reason } } };
}

/** True when the display shows a level per hertz, so that RBW and filter play no part in the density. */
const needsBandwidth = (unit: 'dBm' | 'dBm/Hz') => unit === 'dBm';

/**
 * Completes settings with the assumptions that a density can be conditional on, and names them.
 * Never assumes RBW, sweeps or averaging scale: without those the answer is asked for or measured.
 */
export function effectiveSettings(given: Settings, unit: 'dBm' | 'dBm/Hz'): EffectiveSettings {
  const assumptions: Assumption[] = [];
  const needsKind = needsBandwidth(unit) && given.bandwidthRatio === undefined;
  if (given.impedanceOhm === undefined) {
    assumptions.push({ name: 'impedanceOhm', value: 50, reason: 'usual impedance (common practice)' });
  }
  if (needsKind && given.rbwKind === undefined) {
    assumptions.push({ name: 'rbwKind', value: '3dB', reason: 'usual meaning of an RBW (common practice)' });
  }
  if (needsKind && given.filterShape === undefined && given.rbwKind?.value !== 'noise') {
    assumptions.push({
      name: 'filterShape',
      value: 'gaussian',
      reason: 'near-Gaussian filters are usual (common practice)',
    });
  }
  if (given.detector === undefined) {
    assumptions.push({
      name: 'detector',
      value: 'sample',
      reason: 'not stated; the averaging check would show another',
    });
  }
  const settings = assumptions.reduce(put, given);
  return { settings, values: settingValues(settings), assumed: new Set(assumptions.map(({ name }) => name)) };
}

/** Where a setting came from, in a few words: `file, line 6`, `Mara Quillstead`, `assumed`, `not stated`. */
export function originWords(settings: Settings, name: SettingName): string {
  const origin = settings[name]?.origin;
  switch (origin?.kind) {
    case 'file':
      return `file, line ${origin.line}`;
    case 'instrument':
    case 'person':
      return origin.name;
    case 'command':
      return 'command line';
    case 'assumed':
      return `assumed: ${origin.reason}`;
    case undefined:
      return 'not stated';
  }
}
