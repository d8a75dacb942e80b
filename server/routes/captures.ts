import { Router } from 'express';
import { CaptureChanges, CaptureQuery } from '../../shared/capture.ts';
import type { Capture } from '../entities/capture.ts';
import * as policy from '../policies/captures.ts';
import type { Actor } from '../policies/verdict.ts';
import { presentCapture, presentCaptureSummary } from '../presenters/capture.ts';
import { requireCampaign } from '../services/campaigns.ts';
import { changeCapture } from '../services/change-capture.ts';
import type { Context } from '../services/context.ts';
import { Gate } from '../services/gate.ts';
import { applyLateFields } from '../services/late-fields.ts';
import { listCaptures } from '../services/list-captures.ts';
import { loadCapture, loadEstimates, loadTraces } from '../services/load-capture.ts';
import { authorise } from '../services/problems.ts';
import { receiveUpload } from '../services/receive-upload.ts';
import { actorOf, parsed } from './request.ts';

/** Uploads that write at once, and that wait for their turn with a piece in memory each. */
const UPLOADS = { atOnce: 8, inLine: 56 };

/** Captures: the table, upload, one capture, its changes. */
export function captureRoutes(context: Context): Router {
  const { dataSource } = context;
  const router = Router();
  const gate = new Gate(UPLOADS.atOnce, UPLOADS.inLine);

  router.get('/api/labs/:labId/captures', async (request, response) => {
    const { labId } = request.params;
    authorise(policy.seeCaptures(actorOf(request), { labId }));
    const query = parsed(CaptureQuery, request.query, 'query');
    const { captures, nextCursor, total } = await listCaptures(dataSource, labId, query);
    response.json({ items: captures.map(presentCaptureSummary), nextCursor, total });
  });

  router.post('/api/labs/:labId/captures', async (request, response) => {
    const { labId } = request.params;
    const actor = actorOf(request);
    authorise(policy.uploadCaptures(actor, { labId }));
    const { items, late } = await receiveUpload(context, gate, actor, labId, request, (campaignId) =>
      requireCampaign(dataSource, labId, campaignId),
    );
    await applyLateFields(context, actor, items, late);
    response.status(items.some(({ duplicate, id }) => id !== null && !duplicate) ? 201 : 200).json({ items });
  });

  const present = async (capture: Capture, actor: Actor) => {
    const [traces, estimates] = await Promise.all([
      loadTraces(dataSource, capture.id),
      loadEstimates(dataSource, capture.id),
    ]);
    return presentCapture(capture, traces, estimates, actor);
  };

  router.get('/api/captures/:captureId', async (request, response) => {
    const actor = actorOf(request);
    const capture = await loadCapture(dataSource, request.params.captureId);
    authorise(policy.seeCaptures(actor, capture));
    response.json(await present(capture, actor));
  });

  router.patch('/api/captures/:captureId', async (request, response) => {
    const actor = actorOf(request);
    const capture = await loadCapture(dataSource, request.params.captureId);
    authorise(policy.editCapture(actor, capture));
    await changeCapture(dataSource, actor, capture, parsed(CaptureChanges, request.body, 'request'));
    response.json(await present(await loadCapture(dataSource, capture.id), actor));
  });

  return router;
}
