import type { Capture } from '../../../../shared/capture.ts';
import type { Estimate } from '../../../../shared/estimate.ts';
import type { Origin, SettingName, Settings } from '../../../../shared/settings.ts';
import { clock, day, firstName } from '../../../lib/time.ts';
import type { DraftControls } from '../contract.ts';

export type Value = string | number | boolean;

/** A setting as the form shows it. */
export interface Held {
  value: Value | null;
  origin: Origin | null;
  /** Changed and not kept yet. */
  unsaved: boolean;
  /** Some person set it, kept or not; what the file says can be had back. */
  byPerson: boolean;
  /** What the file says, if it says anything. */
  inFile: Value | null;
}

const isValue = (value: unknown): value is Value =>
  typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean';

/** What a setting is now: as the shown estimate has it, with the draft on top. */
export function heldSetting(
  name: SettingName,
  {
    capture,
    estimate,
    draft,
    readOnly,
  }: { capture: Capture; estimate: Estimate | null; draft: DraftControls; readOnly: boolean },
): Held {
  const trace = capture.traces.find(({ index }) => index === draft.draft.traceIndex);
  const fromFile: Settings = { ...capture.fileSettings, ...trace?.settings };
  const inFile = fromFile[name]?.value ?? null;
  const changes = draft.draft.settings;
  const settled = readOnly ? estimate?.settings[name] : (estimate?.settings[name] ?? capture.settings[name]);
  if (!readOnly && Object.hasOwn(changes, name)) {
    const wanted = changes[name];
    if (isValue(wanted)) return { value: wanted, origin: null, unsaved: true, byPerson: true, inFile };
    const assumed = settled?.origin.kind === 'assumed' ? settled : undefined;
    const back = fromFile[name] ?? assumed;
    return {
      value: back?.value ?? null,
      origin: back?.origin ?? null,
      unsaved: true,
      byPerson: false,
      inFile,
    };
  }
  const kept =
    !readOnly && settled?.origin.kind === 'person' && capture.settings[name] === undefined
      ? undefined
      : settled;
  return {
    value: kept?.value ?? null,
    origin: kept?.origin ?? null,
    unsaved: false,
    byPerson: kept?.origin.kind === 'person',
    inFile,
  };
}

/** Where a value came from, in a few words. */
export function originWords(origin: Origin | null, now: Date = new Date()): string {
  switch (origin?.kind) {
    case 'file':
      return `file, line ${origin.line}`;
    case 'instrument':
      return origin.name;
    case 'person': {
      const today = new Date(origin.at).toDateString() === now.toDateString();
      return `${firstName(origin.name)}, ${today ? clock(origin.at) : day(origin.at)}`;
    }
    case 'command':
      return 'command line';
    case 'assumed':
      return 'assumed';
    case undefined:
      return 'not stated';
  }
}
