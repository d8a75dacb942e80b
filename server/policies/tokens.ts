import { EVERY_ROLE, within, type Actor, type Verdict } from './verdict.ts';

interface TokenOwner {
  labId: string;
  personId: string;
}

/** A token for a lab of one's own, made by a signed-in person: tokens don't make tokens. */
export function createToken(actor: Actor, { labId }: { labId: string }): Verdict {
  const verdict = within(actor, labId, EVERY_ROLE);
  return verdict === 'allowed' && actor.by === 'token' ? 'forbidden' : verdict;
}

/** One's own tokens; the lab's administrator revokes those of others too. */
export function revokeToken(actor: Actor, token: TokenOwner): Verdict {
  if (actor.by === 'session' && token.personId === actor.personId) return 'allowed';
  if (token.personId === actor.personId) return within(actor, token.labId, EVERY_ROLE);
  return within(actor, token.labId, ['administrator']) === 'allowed' ? 'allowed' : 'absent';
}
