import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Router } from 'express';
import { z } from 'zod';
import { PointsQuery, type Points } from '../../shared/capture.ts';
import * as policy from '../policies/captures.ts';
import type { Context } from '../services/context.ts';
import { loadCapture, loadTraces } from '../services/load-capture.ts';
import { authorise, notFound } from '../services/problems.ts';
import { captureBytes } from '../services/stored-bytes.ts';
import { toBytes } from '../services/trace-bytes.ts';
import type { PointsAnswer } from '../threads/pool.ts';
import { actorOf, parsed } from './request.ts';

const PLAIN_TYPES = ['text/csv', 'text/plain'];

const pointsJson = (answer: PointsAnswer): Points =>
  answer.form === 'exact'
    ? { form: 'exact', unit: answer.unit, hz: [...answer.hz], level: [...answer.level] }
    : { form: 'buckets', unit: answer.unit, hz: [...answer.hz], min: [...answer.min], max: [...answer.max] };

/** What a capture holds: the very bytes, and its traces' points. */
export function captureDataRoutes(context: Context): Router {
  const { dataSource, threads } = context;
  const router = Router();

  router.get('/api/captures/:captureId/file', async (request, response) => {
    const capture = await loadCapture(dataSource, request.params.captureId);
    authorise(policy.seeCaptures(actorOf(request), capture));
    response.attachment(capture.fileName);
    response.setHeader(
      'Content-Type',
      PLAIN_TYPES.includes(capture.mediaType) ? capture.mediaType : 'application/octet-stream',
    );
    response.setHeader('Content-Length', capture.bytes);
    response.setHeader('X-Content-SHA256', capture.sha256);
    await pipeline(Readable.from(captureBytes(dataSource, capture.id)), response);
  });

  router.get('/api/captures/:captureId/traces/:index/points', async (request, response) => {
    const capture = await loadCapture(dataSource, request.params.captureId);
    authorise(policy.seeCaptures(actorOf(request), capture));
    const query = parsed(PointsQuery, request.query, 'query');
    const traceIndex = z.coerce.number().int().min(0).safeParse(request.params.index).data;
    const traces = await loadTraces(dataSource, capture.id);
    if (traceIndex === undefined || !traces.some(({ index }) => index === traceIndex)) {
      throw notFound('This capture has no such trace; traces are numbered from 0.');
    }
    const answer = await threads.points({ captureId: capture.id, traceIndex, query });
    response.vary('Accept');
    if (request.accepts(['json', 'application/octet-stream']) !== 'application/octet-stream') {
      response.json(pointsJson(answer));
      return;
    }
    const arrays = answer.form === 'exact' ? [answer.hz, answer.level] : [answer.hz, answer.min, answer.max];
    response.set({
      'X-Points-Form': answer.form,
      'X-Points-Count': String(answer.hz.length),
      'X-Level-Unit': answer.unit,
      'Content-Type': 'application/octet-stream',
    });
    response.send(Buffer.concat(arrays.map(toBytes)));
  });

  return router;
}
