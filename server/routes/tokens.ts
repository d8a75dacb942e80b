import { Router } from 'express';
import { TokenRequest, type TokenSummary } from '../../shared/session.ts';
import type { Token } from '../entities/token.ts';
import * as policy from '../policies/tokens.ts';
import type { Context } from '../services/context.ts';
import { authorise } from '../services/problems.ts';
import { createToken, listTokens, loadToken, revokeToken } from '../services/tokens.ts';
import { actorOf, parsed } from './request.ts';

const presentToken = (token: Token): TokenSummary => ({
  id: token.id,
  name: token.name,
  labId: token.labId,
  createdAt: token.createdAt.toISOString(),
  lastUsedAt: token.lastUsedAt?.toISOString() ?? null,
  expiresAt: token.expiresAt?.toISOString() ?? null,
});

/** Personal tokens for scripts. */
export function tokenRoutes({ dataSource }: Context): Router {
  const router = Router();

  router.get('/api/tokens', async (request, response) => {
    const tokens = await listTokens(dataSource, actorOf(request));
    response.json({ items: tokens.map(presentToken), nextCursor: null });
  });

  router.post('/api/tokens', async (request, response) => {
    const actor = actorOf(request);
    const body = parsed(TokenRequest, request.body, 'request');
    authorise(policy.createToken(actor, body));
    response.status(201).json(await createToken(dataSource, actor, body));
  });

  router.delete('/api/tokens/:tokenId', async (request, response) => {
    const actor = actorOf(request);
    const token = await loadToken(dataSource, request.params.tokenId);
    authorise(policy.revokeToken(actor, token));
    await revokeToken(dataSource, actor, token);
    response.status(204).end();
  });

  return router;
}
