import type { ErrorRequestHandler, RequestHandler } from 'express';
import type { Logger } from 'pino';
import { z } from 'zod';
import type { Problem } from '../../shared/problem.ts';
import { isDatabaseAway } from '../services/database-away.ts';
import { busy, invalid, notFound, ProblemError, tooLarge } from '../services/problems.ts';

/** What express and its parsers throw about a request. */
const RequestFault = z.object({ status: z.number().int().min(400).max(499), type: z.string().optional() });

function expected(error: unknown): ProblemError | null {
  if (error instanceof ProblemError) return error;
  if (isDatabaseAway(error))
    return busy('The database doesn’t answer just now; nothing was changed. Try again in some seconds.');
  const fault = RequestFault.safeParse(error);
  if (!fault.success) return null;
  if (fault.data.status === 404) return notFound('There is nothing at this address; check its spelling.');
  if (fault.data.type === 'entity.too.large')
    return tooLarge('The request is larger than 1 MB; send less at once.');
  if (fault.data.type === 'entity.parse.failed') return invalid('The request isn’t JSON that can be read.');
  return invalid('The request can’t be understood.');
}

/** Answers every error as a problem document; what nobody expected is logged under the request's id. */
export function problemDocuments(log: Logger): ErrorRequestHandler {
  return (error, request, response, next) => {
    const requestId = String(request.id);
    if (response.closed || response.destroyed) {
      log.debug({ requestId }, 'the asker left before the answer was complete');
      return;
    }
    const problem = expected(error);
    if (!problem)
      log.error({ err: error, requestId, method: request.method, path: request.path }, 'unexpected error');
    if (response.headersSent) {
      next(error);
      return;
    }
    const details = problem?.details ?? {
      status: 500,
      kind: 'unexpected',
      title: 'Unexpected error',
      detail: `Something failed that shouldn’t have; nothing was changed. Tell your administrator the number ${requestId}.`,
    };
    if (!request.complete) response.set('Connection', 'close');
    if (problem?.details.retryAfterSeconds)
      response.set('Retry-After', String(problem.details.retryAfterSeconds));
    const body: Problem = {
      type: `/problems/${details.kind}`,
      title: details.title,
      status: details.status,
      detail: details.detail,
      requestId,
      errors: problem?.details.errors,
    };
    response.status(details.status).set('Cache-Control', 'no-store').type('application/problem+json');
    response.send(JSON.stringify(body));
  };
}

/** The answer where no route fits. */
export const unknownPath: RequestHandler = () => {
  throw notFound('There is nothing at this address; check its spelling.');
};
