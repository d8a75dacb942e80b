import { Role } from '../../shared/session.ts';

/** Who asks: a person with a role in each lab of theirs (a token narrows that to one lab). */
export interface Actor {
  personId: string;
  name: string;
  email: string;
  by: 'session' | 'token';
  labs: readonly { id: string; name: string; role: Role }[];
}

/** `absent`: the asking person must not learn that the object exists. */
export type Verdict = 'allowed' | 'forbidden' | 'absent';

export const EVERY_ROLE: readonly Role[] = Role.options;

/** Whether a person may do what `roles` may do in a lab; in a foreign lab everything is absent. */
export function within(actor: Actor, labId: string, roles: readonly Role[]): Verdict {
  const lab = actor.labs.find(({ id }) => id === labId);
  if (!lab) return 'absent';
  return roles.includes(lab.role) ? 'allowed' : 'forbidden';
}
