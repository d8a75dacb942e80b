import { Router } from 'express';
import type { Health } from '../../shared/session.ts';
import type { Context } from '../services/context.ts';
import { readHealth } from '../services/health.ts';

/** Signs of life, for everybody. */
export function healthRoutes(context: Context): Router {
  const router = Router();
  router.get('/api/health', async (_request, response) => {
    const health: Health = await readHealth(context);
    response.status(health.database ? 200 : 503).json(health);
  });
  return router;
}
