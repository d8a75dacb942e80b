import { createHash } from 'node:crypto';
import type { Request, RequestHandler } from 'express';
import { ipKeyGenerator, rateLimit, type Store } from 'express-rate-limit';
import type { Pool } from 'pg';
import { z } from 'zod';
import { ProblemError } from '../services/problems.ts';

const WINDOW_MINUTES = 15;
export const FAILURES_PER_ACCOUNT = 10;
const FAILURES_PER_ADDRESS = 50;

/** Counts in the database, so that all web processes count together. */
class DatabaseStore implements Store {
  readonly localKeys = false;
  readonly #pool: Pool;
  readonly #prefix: string;

  constructor(pool: Pool, prefix: string) {
    this.#pool = pool;
    this.#prefix = prefix;
  }

  async increment(key: string) {
    const { rows } = await this.#pool.query<{ hits: number; resets_at: Date }>(
      `INSERT INTO rate_limit AS earlier (key, hits, resets_at) VALUES ($1, 1, now() + make_interval(mins => $2))
       ON CONFLICT (key) DO UPDATE SET
         hits = CASE WHEN earlier.resets_at <= now() THEN 1 ELSE earlier.hits + 1 END,
         resets_at = CASE WHEN earlier.resets_at <= now() THEN excluded.resets_at ELSE earlier.resets_at END
       RETURNING hits, resets_at`,
      [this.#prefix + key, WINDOW_MINUTES],
    );
    return { totalHits: rows[0].hits, resetTime: rows[0].resets_at };
  }

  async get(key: string) {
    const { rows } = await this.#pool.query<{ hits: number; resets_at: Date }>(
      'SELECT hits, resets_at FROM rate_limit WHERE key = $1 AND resets_at > now()',
      [this.#prefix + key],
    );
    return rows[0] ? { totalHits: rows[0].hits, resetTime: rows[0].resets_at } : undefined;
  }

  async decrement(key: string) {
    await this.#pool.query('UPDATE rate_limit SET hits = greatest(0, hits - 1) WHERE key = $1', [
      this.#prefix + key,
    ]);
  }

  async resetKey(key: string) {
    await this.#pool.query('DELETE FROM rate_limit WHERE key = $1', [this.#prefix + key]);
  }
}

const accountKey = (request: Request) => {
  const body = z.object({ email: z.string() }).safeParse(request.body);
  const email = body.success ? body.data.email.trim().toLowerCase() : '';
  return createHash('sha256').update(email).digest('hex');
};

const addressKey = (request: Request) => ipKeyGenerator(request.ip ?? '');

export interface SignInLimits {
  handlers: RequestHandler[];
  /** Failures that are left to this account before it must wait. */
  triesLeft(request: Request): Promise<number>;
}

/** Sign-in fails at most so often per account and per address within a quarter of an hour; successes don't count. */
export function signInLimits(pool: Pool): SignInLimits {
  const accountStore = new DatabaseStore(pool, 'account:');
  const limit = (store: Store, keyGenerator: (request: Request) => string, failures: number, who: string) =>
    rateLimit({
      windowMs: WINDOW_MINUTES * 60_000,
      limit: failures,
      store,
      keyGenerator,
      skipSuccessfulRequests: true,
      standardHeaders: false,
      legacyHeaders: false,
      handler: async (request, _response, next) => {
        const reached = await store.get?.(keyGenerator(request));
        const seconds = Math.max(1, Math.ceil(((reached?.resetTime?.getTime() ?? 0) - Date.now()) / 1000));
        next(
          new ProblemError({
            status: 429,
            kind: 'too-many-tries',
            title: 'Too many tries',
            detail: `Signing in failed too often ${who}; try again in ${Math.ceil(seconds / 60)} min.`,
            retryAfterSeconds: seconds,
          }),
        );
      },
    });
  return {
    handlers: [
      limit(accountStore, accountKey, FAILURES_PER_ACCOUNT, 'for this account'),
      limit(new DatabaseStore(pool, 'address:'), addressKey, FAILURES_PER_ADDRESS, 'from this address'),
    ],
    triesLeft: async (request) => {
      const hits = (await accountStore.get(accountKey(request)))?.totalHits ?? 0;
      return Math.max(0, FAILURES_PER_ACCOUNT - hits);
    },
  };
}
