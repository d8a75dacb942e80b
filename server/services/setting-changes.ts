import type { z } from 'zod';
import { Settings, type SettingChanges } from '../../shared/settings.ts';
import type { SettingOverrides } from '../entities/capture.ts';
import type { Actor } from '../policies/verdict.ts';

export type SettingChangeValues = z.infer<typeof SettingChanges>;

/** What people set, after a person's changes: a value sets, null takes back to what the file says. */
export function applyChanges(
  earlier: SettingOverrides,
  changes: SettingChangeValues,
  actor: Pick<Actor, 'name'>,
  at: Date,
): SettingOverrides {
  const overrides = { ...earlier };
  for (const [name, value] of Object.entries(changes)) {
    if (value === undefined) continue;
    if (value === null) delete overrides[name];
    else overrides[name] = { value, origin: { kind: 'person', name: actor.name, at: at.toISOString() } };
  }
  return overrides;
}

/** The settings that hold: the file's, the trace's own, then what people set. */
export function effectiveSettings(
  fileSettings: Settings,
  traceSettings: Settings,
  overrides: SettingOverrides,
): Settings {
  return Settings.parse({ ...fileSettings, ...traceSettings, ...overrides });
}
