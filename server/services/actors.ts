import { createHash } from 'node:crypto';
import type { DataSource } from 'typeorm';
import { Role } from '../../shared/session.ts';
import type { Actor } from '../policies/verdict.ts';

interface ActorRow {
  id: string;
  name: string;
  email: string;
  lab_id: string | null;
  lab_name: string | null;
  role: string | null;
}

const ACTOR_ROWS = `
  SELECT person.id, person.name, person.email, lab.id AS lab_id, lab.name AS lab_name, membership.role
  FROM person
  LEFT JOIN membership ON membership.person_id = person.id
  LEFT JOIN lab ON lab.id = membership.lab_id`;

function actorFrom(rows: ActorRow[], by: Actor['by']): Actor | null {
  const [first] = rows;
  if (!first) return null;
  const labs = rows.flatMap(({ lab_id, lab_name, role }) =>
    lab_id !== null && lab_name !== null ? [{ id: lab_id, name: lab_name, role: Role.parse(role) }] : [],
  );
  return { personId: first.id, name: first.name, email: first.email, by, labs };
}

/** The person with their labs and roles; null: unknown or disabled. */
export async function actorOfPerson(dataSource: DataSource, personId: string): Promise<Actor | null> {
  const rows = await dataSource.query<ActorRow[]>(
    `${ACTOR_ROWS} WHERE person.id = $1 AND person.disabled_at IS NULL ORDER BY lab.name`,
    [personId],
  );
  return actorFrom(rows, 'session');
}

export const tokenHash = (secret: string): Buffer => createHash('sha256').update(secret, 'utf8').digest();

/** The person behind a token, in the token's lab alone; null: unknown, expired, revoked, disabled or no longer a member. */
export async function actorOfToken(dataSource: DataSource, secret: string): Promise<Actor | null> {
  const hash = tokenHash(secret);
  const rows = await dataSource.query<ActorRow[]>(
    `${ACTOR_ROWS}
     JOIN token ON token.person_id = person.id AND token.lab_id = lab.id
     WHERE token.hash = $1 AND token.revoked_at IS NULL AND (token.expires_at IS NULL OR token.expires_at > now())
       AND person.disabled_at IS NULL`,
    [hash],
  );
  if (rows.length > 0) {
    await dataSource.query(
      `UPDATE token SET last_used_at = now()
       WHERE hash = $1 AND (last_used_at IS NULL OR last_used_at < now() - interval '1 minute')`,
      [hash],
    );
  }
  return actorFrom(rows, 'token');
}
