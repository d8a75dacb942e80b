import { Router, type Request } from 'express';
import passport from 'passport';
import { Strategy } from 'passport-local';
import { z } from 'zod';
import { SignIn, type Session } from '../../shared/session.ts';
import type { Actor } from '../policies/verdict.ts';
import { actorOfPerson } from '../services/actors.ts';
import type { Context } from '../services/context.ts';
import { ProblemError } from '../services/problems.ts';
import { checkPassword } from '../services/sign-in.ts';
import { cookieName } from './identity.ts';
import { signInLimits } from './rate-limits.ts';
import { actorOf, parsed } from './request.ts';

const presentSession = ({ personId, name, email, labs }: Actor): Session => ({
  person: { id: personId, name, email },
  labs: labs.map((lab) => ({ id: lab.id, name: lab.name, role: lab.role })),
});

/** Tells the page, which can't see the session cookie, that asking who is signed in makes sense. Opens nothing by itself. */
const SIGNED_IN_HINT = 'perhertz_signed_in';
const HINT_MS = 7 * 24 * 3600 * 1000;

const called = (run: (done: (error: unknown) => void) => void) =>
  new Promise<void>((resolve, reject) => run((error) => (error ? reject(error) : resolve())));

/** Sign in, who am I, sign out. */
export function sessionRoutes({ config, dataSource, sessionPool }: Context): Router {
  const router = Router();
  const limits = signInLimits(sessionPool);
  const hintOptions = { path: '/', secure: config.secureCookies, sameSite: 'lax' } as const;
  const strategy = new Strategy({ usernameField: 'email' }, (email, password, done) => {
    checkPassword(dataSource, email, password).then(
      (personId) => done(null, personId ?? false),
      (error: unknown) => done(error),
    );
  });
  const authenticator = new passport.Passport();
  authenticator.use(strategy);

  const personOf = (request: Request) =>
    new Promise<string | null>((resolve, reject) => {
      const answered = (error: unknown, user: unknown) => {
        if (error) reject(error);
        else resolve(z.string().safeParse(user).data ?? null);
      };
      authenticator.authenticate('local', { session: false }, answered)(request, request.res, reject);
    });

  router.post(
    '/api/session',
    (request, _response, next) => {
      request.body = parsed(SignIn, request.body, 'request');
      next();
    },
    ...limits.handlers,
    async (request, response) => {
      const personId = await personOf(request);
      const actor = personId === null ? null : await actorOfPerson(dataSource, personId);
      if (!actor) {
        const left = await limits.triesLeft(request);
        const tries = left === 1 ? 'One try is' : `${left === 0 ? 'No' : left} tries are`;
        throw new ProblemError({
          status: 401,
          kind: 'sign-in-refused',
          title: 'Not signed in',
          detail: `The address and the password don’t fit together. ${tries} left before a pause of 15 min.`,
        });
      }
      await called((done) => request.session.regenerate(done));
      request.session.personId = actor.personId;
      request.session.signedInAt = Date.now();
      await called((done) => request.session.save(done));
      response.cookie(SIGNED_IN_HINT, '1', { ...hintOptions, maxAge: HINT_MS });
      response.json(presentSession(actor));
    },
  );

  router.get('/api/session', (request, response) => {
    response.json(presentSession(actorOf(request)));
  });

  router.delete('/api/session', async (request, response) => {
    await called((done) => request.session.destroy(done));
    response.clearCookie(cookieName(config.secureCookies), {
      path: '/',
      secure: config.secureCookies,
      httpOnly: true,
      sameSite: 'lax',
    });
    response.clearCookie(SIGNED_IN_HINT, hintOptions);
    response.status(204).end();
  });

  return router;
}
