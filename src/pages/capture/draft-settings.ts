import { z } from 'zod';
import type { Capture } from '../../../shared/capture.ts';
import type { Estimate } from '../../../shared/estimate.ts';
import { SettingChanges, type SettingName, type Settings, SettingValues } from '../../../shared/settings.ts';
import { safeJson } from '../../api/http.ts';

export type Changes = Record<string, unknown>;

const storageKey = (captureId: string) => `perhertz.draft.${captureId}`;
const Stored = z.record(z.string(), z.unknown()).pipe(SettingChanges);

/** The settings that this tab holds unsaved for a capture. */
export function storedChanges(captureId: string): Changes {
  try {
    const parsed = Stored.safeParse(safeJson(sessionStorage.getItem(storageKey(captureId)) ?? ''));
    return parsed.success ? parsed.data : {};
  } catch {
    return {};
  }
}

export function storeChanges(captureId: string, changes: Changes): void {
  try {
    if (Object.keys(changes).length === 0) sessionStorage.removeItem(storageKey(captureId));
    else sessionStorage.setItem(storageKey(captureId), JSON.stringify(changes));
  } catch {
    return;
  }
}

export const isSettingName = (name: string): name is SettingName => name in SettingValues.shape;

/** Changes without those that the capture's settings hold already. */
export function realChanges(changes: Changes, settings: Settings): Changes {
  return Object.fromEntries(
    Object.entries(changes).filter(([name, value]) => {
      if (!isSettingName(name)) return false;
      const held = settings[name];
      return value === null ? held?.origin.kind === 'person' : held?.value !== value;
    }),
  );
}

/** Whether people set something on the capture that the latest estimate doesn't rest on yet. */
export function settingsMovedOn(capture: Capture, latest: Estimate): boolean {
  return Object.entries(capture.settings).some(
    ([name, setting]) =>
      setting?.origin.kind === 'person' &&
      isSettingName(name) &&
      latest.settings[name]?.value !== setting.value,
  );
}
