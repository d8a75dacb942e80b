import { EVERY_ROLE, within, type Actor, type Verdict } from './verdict.ts';

interface InLab {
  labId: string;
}

export const seeEstimate = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);

/** Make working estimates, kept or not. */
export const makeEstimate = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);

export const submitEstimate = (actor: Actor, { labId }: InLab): Verdict =>
  within(actor, labId, ['engineer', 'reviewer', 'administrator']);
