import { EVERY_ROLE, within, type Actor, type Verdict } from './verdict.ts';

interface InLab {
  labId: string;
}

export const seeCaptures = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);

export const uploadCaptures = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);

/** Correct settings, rename, move to a campaign. */
export const editCapture = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);
