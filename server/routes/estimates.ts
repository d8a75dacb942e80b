import { pipeline } from 'node:stream/promises';
import { Readable } from 'node:stream';
import { Router } from 'express';
import { z } from 'zod';
import { EstimateRequest } from '../../shared/estimate.ts';
import { SettingChanges } from '../../shared/settings.ts';
import * as policy from '../policies/estimates.ts';
import { cleanedTraceCsv } from '../presenters/trace-csv.ts';
import { presentEstimate, presentWhatIf } from '../presenters/estimate.ts';
import type { Context } from '../services/context.ts';
import { loadCapture, loadEstimate } from '../services/load-capture.ts';
import { changeAgainstLatest, computeEstimate, keepEstimate } from '../services/make-estimate.ts';
import { authorise } from '../services/problems.ts';
import { tracePoints } from '../services/stored-bytes.ts';
import { actorOf, parsed } from './request.ts';

const CheckedRequest = EstimateRequest.extend({ settings: SettingChanges.optional() });
const Query = z.object({ keep: z.enum(['true', 'false']).default('true') });

/** Estimates: compute, keep, read, export. */
export function estimateRoutes(context: Context): Router {
  const { dataSource } = context;
  const router = Router();

  router.post('/api/captures/:captureId/estimates', async (request, response) => {
    const actor = actorOf(request);
    const capture = await loadCapture(dataSource, request.params.captureId);
    authorise(policy.makeEstimate(actor, capture));
    const { keep } = parsed(Query, request.query, 'query');
    const body = parsed(CheckedRequest, request.body, 'request');
    if (keep === 'false') {
      const whatIf = await computeEstimate(context, actor, capture, body);
      const change = await changeAgainstLatest(context, capture.id, whatIf, body);
      response.json(presentWhatIf(whatIf, capture.id, change));
      return;
    }
    const { estimate } = await loadEstimate(dataSource, await keepEstimate(context, actor, capture, body));
    response.status(201).location(`/api/estimates/${estimate.id}`).json(presentEstimate(estimate));
  });

  router.get('/api/estimates/:estimateId', async (request, response) => {
    const { estimate, capture } = await loadEstimate(dataSource, request.params.estimateId);
    authorise(policy.seeEstimate(actorOf(request), capture));
    response.json(presentEstimate(estimate));
  });

  router.get('/api/estimates/:estimateId/trace.csv', async (request, response) => {
    const { estimate, capture } = await loadEstimate(dataSource, request.params.estimateId);
    authorise(policy.seeEstimate(actorOf(request), capture));
    const points = tracePoints(dataSource, capture.id, estimate.body.input.traceIndex);
    response.attachment(`${capture.number}-${estimate.number} trace.csv`);
    await pipeline(Readable.from(cleanedTraceCsv(capture, estimate, points)), response);
  });

  return router;
}
