import { randomBytes } from 'node:crypto';
import { IsNull, type DataSource } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';
import type { NewToken, TokenRequest } from '../../shared/session.ts';
import { TokenEntity, type Token } from '../entities/token.ts';
import type { Actor } from '../policies/verdict.ts';
import { tokenHash } from './actors.ts';
import { recordAudit } from './audit.ts';
import { isId } from './load-capture.ts';
import { notFound } from './problems.ts';

/** Makes a personal token for one lab; the secret is answered this once and stored as a hash alone. */
export async function createToken(
  dataSource: DataSource,
  actor: Actor,
  { name, labId }: TokenRequest,
): Promise<NewToken> {
  const token = `perhertz_${randomBytes(32).toString('base64url')}`;
  const id = uuidv7();
  await dataSource.transaction(async (manager) => {
    await manager
      .getRepository(TokenEntity)
      .insert({ id, labId, personId: actor.personId, name, hash: tokenHash(token) });
    await recordAudit(manager, {
      labId,
      personId: actor.personId,
      action: 'token.created',
      objectId: id,
      detail: { name },
    });
  });
  return { id, name, token };
}

/** One's own tokens that aren't revoked, in the labs that the asking person sees. */
export function listTokens(dataSource: DataSource, actor: Actor): Promise<Token[]> {
  return dataSource.getRepository(TokenEntity).find({
    where: actor.labs.map(({ id }) => ({ personId: actor.personId, labId: id, revokedAt: IsNull() })),
    order: { id: 'DESC' },
  });
}

/** @throws ProblemError 404 where there is no such token or it's revoked. */
export async function loadToken(dataSource: DataSource, tokenId: string): Promise<Token> {
  const token = isId(tokenId)
    ? await dataSource.getRepository(TokenEntity).findOneBy({ id: tokenId, revokedAt: IsNull() })
    : null;
  if (!token) throw notFound();
  return token;
}

export async function revokeToken(dataSource: DataSource, actor: Actor, token: Token): Promise<void> {
  await dataSource.transaction(async (manager) => {
    await manager.getRepository(TokenEntity).update({ id: token.id }, { revokedAt: new Date() });
    await recordAudit(manager, {
      labId: token.labId,
      personId: actor.personId,
      action: 'token.revoked',
      objectId: token.id,
      detail: { name: token.name },
    });
  });
}
