import { Router } from 'express';
import type { LabEvent } from '../../shared/events.ts';
import { actorOfPerson, actorOfToken } from '../services/actors.ts';
import type { Context } from '../services/context.ts';
import { busy } from '../services/problems.ts';
import { actorOf } from './request.ts';

const HEARTBEAT_MS = 20_000;

/** Server-sent events of the labs that the asking person is in. */
export function eventRoutes({ dataSource, events }: Context): Router {
  const router = Router();

  router.get('/api/events', (request, response) => {
    const actor = actorOf(request);
    if (!events.listening) throw busy('Events can’t be followed just now; try again in some seconds.', 2);
    let labs = new Set(actor.labs.map(({ id }) => id));
    response.writeHead(200, {
      'Content-Type': 'text/event-stream; charset=utf-8',
      'Cache-Control': 'no-store',
      'X-Accel-Buffering': 'no',
    });
    response.write('retry: 1000\n\n');

    const send = (event: LabEvent) => {
      if (labs.has(event.labId)) response.write(`data: ${JSON.stringify(event)}\n\n`);
    };
    const end = () => response.end();
    /** Membership may have ended since: the heartbeat asks again. */
    const beat = async () => {
      const bearer = /^Bearer +(\S+)$/i.exec(request.get('authorization') ?? '')?.[1];
      const now = await (bearer === undefined
        ? actorOfPerson(dataSource, actor.personId)
        : actorOfToken(dataSource, bearer));
      if (!now) return end();
      labs = new Set(now.labs.map(({ id }) => id));
      response.write(': still here\n\n');
    };
    const heartbeat = setInterval(() => void beat().catch(end), HEARTBEAT_MS);
    events.on('event', send).once('lost', end);
    response.on('close', () => {
      clearInterval(heartbeat);
      events.off('event', send).off('lost', end);
    });
  });

  return router;
}
