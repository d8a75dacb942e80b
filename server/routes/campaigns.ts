import { Router } from 'express';
import { CampaignRequest } from '../../shared/capture.ts';
import * as policy from '../policies/campaigns.ts';
import { createCampaign, listCampaigns } from '../services/campaigns.ts';
import type { Context } from '../services/context.ts';
import { authorise } from '../services/problems.ts';
import { actorOf, parsed } from './request.ts';

/** A lab's campaigns. */
export function campaignRoutes({ dataSource }: Context): Router {
  const router = Router();

  router.get('/api/labs/:labId/campaigns', async (request, response) => {
    const { labId } = request.params;
    authorise(policy.seeCampaigns(actorOf(request), { labId }));
    response.json({ items: await listCampaigns(dataSource, labId), nextCursor: null });
  });

  router.post('/api/labs/:labId/campaigns', async (request, response) => {
    const { labId } = request.params;
    const actor = actorOf(request);
    authorise(policy.createCampaign(actor, { labId }));
    const body = parsed(CampaignRequest, request.body, 'request');
    response.status(201).json(await createCampaign(dataSource, actor, labId, body));
  });

  return router;
}
