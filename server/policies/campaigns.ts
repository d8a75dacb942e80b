import { EVERY_ROLE, within, type Actor, type Verdict } from './verdict.ts';

interface InLab {
  labId: string;
}

export const seeCampaigns = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);

export const createCampaign = (actor: Actor, { labId }: InLab): Verdict => within(actor, labId, EVERY_ROLE);
