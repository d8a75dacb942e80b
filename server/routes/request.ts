import type { Request } from 'express';
import type { z } from 'zod';
import type { Actor } from '../policies/verdict.ts';
import { refused, signInFirst } from '../services/problems.ts';

const actors = new WeakMap<Request, Actor>();

/** Notes who asks, for the routes behind. */
export function setActor(request: Request, actor: Actor): void {
  actors.set(request, actor);
}

/** @throws ProblemError 401 where nobody is signed in. */
export function actorOf(request: Request): Actor {
  const actor = actors.get(request);
  if (!actor) throw signInFirst();
  return actor;
}

/** @throws ProblemError 400 that names each place that the schema refuses. */
export function parsed<T extends z.ZodType>(
  schema: T,
  value: unknown,
  what: 'request' | 'query',
): z.infer<T> {
  const result = schema.safeParse(value ?? {});
  if (!result.success) throw refused(result.error, what);
  return result.data;
}
