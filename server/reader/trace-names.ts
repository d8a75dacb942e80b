import type { Origin, SettingName, Settings } from '../../shared/settings.ts';
import { plainWords } from './setting-words.ts';
import { type SettingValue, toSettings } from './setting-values.ts';

/** The detector that a column's name shows: the extremes of a max or min hold are what a peak detector gives. */
function detectorOfName(name: string): 'peak' | 'negativePeak' | 'average' | 'sample' | 'quasiPeak' | null {
  const words = plainWords(name)
    .replace(/([a-z])(?=\d)/g, '$1 ')
    .split(/[^a-z]+/);
  const has = (...names: string[]) => words.some((word) => names.includes(word));
  if (has('qp', 'quasi', 'quasipeak')) return 'quasiPeak';
  if (has('min', 'minimum', 'minhold', 'neg', 'negative', 'minpeak', 'minima', 'minimo'))
    return 'negativePeak';
  if (
    has('max', 'maximum', 'maxhold', 'peak', 'pos', 'positive', 'pk', 'maxpeak', 'maxima', 'maximo', 'spitze')
  )
    return 'peak';
  if (has('rms', 'avg', 'average', 'mean', 'mittelwert', 'moyenne', 'promedio', 'media')) return 'average';
  return has('sample', 'smp') ? 'sample' : null;
}

/**
 * Settings that a trace's name alone shows.
 * `Average` may as well mean sweeps averaged behind another detector, so it counts only where the file says nothing on either.
 */
export function settingsOfName(name: string, line: number, text: string, file: Settings): Settings {
  const detector = detectorOfName(name);
  const origin: Origin = { kind: 'file', line, text };
  const none = new Map<SettingName, { value: SettingValue; origin: Origin }>();
  if (detector === null || file.detector?.value === detector) return toSettings(none);
  const stated = file.detector ?? file.averagingScale ?? file.sweeps;
  if ((detector === 'average' || detector === 'sample') && stated) return toSettings(none);
  return toSettings(none.set('detector', { value: detector, origin }));
}

/** The same names told apart: `Level`, `Level (2)`. */
export function distinctNames(names: string[]): string[] {
  const seen = new Map<string, number>();
  return names.map((name) => {
    const times = (seen.get(name) ?? 0) + 1;
    seen.set(name, times);
    return times === 1 ? name : `${name} (${times})`;
  });
}
