import connectPgSimple from 'connect-pg-simple';
import type { RequestHandler } from 'express';
import session from 'express-session';
import { actorOfPerson, actorOfToken } from '../services/actors.ts';
import type { Context } from '../services/context.ts';
import { ProblemError, signInFirst } from '../services/problems.ts';
import { setActor } from './request.ts';

declare module 'express-session' {
  interface SessionData {
    personId: string;
    signedInAt: number;
  }
}

const IDLE_MS = 12 * 3600_000;
const ABSOLUTE_MS = 7 * 24 * 3600_000;

export const cookieName = (secureCookies: boolean) => (secureCookies ? '__Host-perhertz' : 'perhertz');

/** The session cookie and its store in the database; idle sessions end after 12 hours. */
export function sessions({ config, sessionPool, log }: Context): RequestHandler {
  const Store = connectPgSimple(session);
  return session({
    name: cookieName(config.secureCookies),
    secret: config.sessionSecret,
    store: new Store({
      pool: sessionPool,
      tableName: 'session',
      errorLog: (...details) => log.warn({ details }, 'the session store failed'),
    }),
    resave: false,
    saveUninitialized: false,
    rolling: true,
    proxy: config.trustProxy > 0,
    cookie: { httpOnly: true, sameSite: 'lax', secure: config.secureCookies, maxAge: IDLE_MS, path: '/' },
  });
}

/** Finds out who asks, by `Authorization: Bearer` or by the session; sessions end after seven days whatever happens. */
export function identify({ dataSource }: Context): RequestHandler {
  return async (request, _response, next) => {
    const bearer = /^Bearer +(\S+)$/i.exec(request.get('authorization') ?? '');
    if (bearer) {
      const actor = await actorOfToken(dataSource, bearer[1]);
      if (!actor) {
        throw new ProblemError({
          status: 401,
          kind: 'token-refused',
          title: 'Token refused',
          detail: 'This token is unknown, expired or revoked; make a new one under your account.',
        });
      }
      setActor(request, actor);
      return next();
    }
    const { personId, signedInAt } = request.session;
    if (personId === undefined) return next();
    const actor =
      Date.now() - (signedInAt ?? 0) < ABSOLUTE_MS ? await actorOfPerson(dataSource, personId) : null;
    if (!actor) {
      await new Promise<void>((resolve, reject) =>
        request.session.destroy((error: unknown) => (error ? reject(error) : resolve())),
      );
      throw signInFirst();
    }
    setActor(request, actor);
    next();
  };
}

const SAFE = ['GET', 'HEAD', 'OPTIONS'];

/** Refuses unsafe requests that another site's page sends along with a person's cookie. */
export const sameOriginOnly: RequestHandler = (request, _response, next) => {
  if (SAFE.includes(request.method)) return next();
  const site = request.get('sec-fetch-site');
  const origin = request.get('origin');
  const foreignSite = site !== undefined && site !== 'same-origin' && site !== 'none';
  const foreignOrigin =
    origin !== undefined && (!URL.canParse(origin) || new URL(origin).host !== request.host);
  if (foreignSite || foreignOrigin) {
    throw new ProblemError({
      status: 403,
      kind: 'foreign-origin',
      title: 'Not allowed',
      detail: 'This request came from another site’s page; use Perhertz’s own pages or a token.',
    });
  }
  next();
};
