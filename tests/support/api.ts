import { createServer, type Server } from 'node:http';
import { runOnce, Logger as QueueLogger } from 'graphile-worker';
import { pino } from 'pino';
import type { Express } from 'express';
import { vi } from 'vitest';
import { z } from 'zod';
import { createApp } from '../../server/app.ts';
import { readConfig } from '../../server/config.ts';
import { taskList } from '../../server/jobs/task-list.ts';
import type { Context } from '../../server/services/context.ts';
import { closeContext, openContext } from '../../server/services/open-context.ts';
import { DEMO_PASSWORD, seedDemo } from '../../server/services/seed-demo.ts';
import { UploadItem } from '../../shared/capture.ts';
import { Session } from '../../shared/session.ts';
import { createTestDatabase } from './database.ts';

vi.setConfig({ testTimeout: 30_000, hookTimeout: 60_000 });

/** People of the two seeded labs by what they are. */
export const EMAILS = {
  technician: 'technician@harbourbench.example',
  engineer: 'engineer@harbourbench.example',
  reviewer: 'reviewer@harbourbench.example',
  administrator: 'admin@harbourbench.example',
  foreigner: 'engineer@tallowreach.example',
} as const;
export type Who = keyof typeof EMAILS;

/** The cookies that an answer sets, as a request sends them back. */
export const cookiesOf = (response: Response): string =>
  response.headers
    .getSetCookie()
    .map((cookie) => cookie.split(';')[0])
    .join('; ');

interface CallOptions {
  json?: unknown;
  body?: BodyInit;
  headers?: Record<string, string>;
  signal?: AbortSignal;
}

/** Somebody who calls the API: with a session cookie, with a token, or nobody. */
export class Caller {
  readonly #baseUrl: string;
  readonly #headers: Record<string, string>;

  constructor(baseUrl: string, headers: Record<string, string> = {}) {
    this.#baseUrl = baseUrl;
    this.#headers = headers;
  }

  call(method: string, path: string, { json, body, headers, signal }: CallOptions = {}): Promise<Response> {
    const sent = new Headers({ ...this.#headers, ...headers });
    if (json !== undefined) sent.set('Content-Type', 'application/json');
    return fetch(`${this.#baseUrl}${path}`, {
      method,
      headers: sent,
      body: json === undefined ? body : JSON.stringify(json),
      signal,
    });
  }

  /** Calls and reads the answer by a schema; fails on any other status. */
  async json<T extends z.ZodType>(
    schema: T,
    method: string,
    path: string,
    options: CallOptions & { status?: number } = {},
  ): Promise<z.infer<T>> {
    const response = await this.call(method, path, options);
    const text = await response.text();
    if (response.status !== (options.status ?? 200)) {
      throw new Error(`${method} ${path} was answered ${response.status}: ${text}`);
    }
    return schema.parse(JSON.parse(text));
  }

  get<T extends z.ZodType>(schema: T, path: string): Promise<z.infer<T>> {
    return this.json(schema, 'GET', path);
  }
}

export interface TestApp {
  app: Express;
  context: Context;
  baseUrl: string;
  databaseUrl: string;
  nobody: Caller;
  /** Signs in (once) and calls as that person. */
  as(who: Who): Promise<Caller>;
  labOf(who: Who): Promise<string>;
  upload(
    who: Who,
    files: Record<string, string | Uint8Array<ArrayBuffer>>,
    fields?: Record<string, string>,
  ): Promise<UploadItem[]>;
  /** Does the waiting jobs in this process, as the worker does. */
  work(): Promise<void>;
  /** SQL as the application's own user. */
  sql<T>(query: string, parameters?: unknown[]): Promise<T[]>;
  close(): Promise<void>;
}

const listen = (server: Server) =>
  new Promise<string>((resolve) =>
    server.listen(0, '127.0.0.1', () => {
      const address = server.address();
      resolve(`http://127.0.0.1:${typeof address === 'object' ? address?.port : ''}`);
    }),
  );

/**
 * The whole web application on a database and a port of its own, with the demo's labs and people.
 * @param environment variables that differ from the defaults.
 */
export async function createTestApp(environment: Record<string, string> = {}): Promise<TestApp> {
  const database = await createTestDatabase();
  const config = readConfig({
    DATABASE_URL: database.url,
    SESSION_SECRET: 'a secret for the tests alone',
    LOG_LEVEL: process.env.TEST_LOG ?? 'fatal',
    ...environment,
  });
  const log = pino({ level: config.logLevel });
  const context = await openContext(config, log);
  await seedDemo(context.dataSource, { production: false });
  const app = createApp(context);
  const server = createServer(app);
  const baseUrl = await listen(server);
  const signedIn = new Map<Who, Promise<{ caller: Caller; labId: string }>>();

  const signIn = async (who: Who) => {
    const response = await new Caller(baseUrl).call('POST', '/api/session', {
      json: { email: EMAILS[who], password: DEMO_PASSWORD },
    });
    const session = Session.parse(await response.json());
    const cookie = cookiesOf(response);
    return { caller: new Caller(baseUrl, { Cookie: cookie }), labId: session.labs[0].id };
  };
  const known = (who: Who) => {
    const promise = signedIn.get(who) ?? signIn(who);
    signedIn.set(who, promise);
    return promise;
  };

  return {
    app,
    context,
    baseUrl,
    databaseUrl: database.url,
    nobody: new Caller(baseUrl),
    as: async (who) => (await known(who)).caller,
    labOf: async (who) => (await known(who)).labId,
    async upload(who, files, fields = {}) {
      const { caller, labId } = await known(who);
      const response = await caller.call('POST', `/api/labs/${labId}/captures`, {
        body: uploadForm(files, fields),
      });
      return z.object({ items: z.array(UploadItem) }).parse(await response.json()).items;
    },
    async work() {
      await runOnce({
        connectionString: database.url,
        noHandleSignals: true,
        logger: new QueueLogger(() => () => {}),
        taskList: taskList({ dataSource: context.dataSource, log, version: config.version }),
      });
    },
    sql: (query, parameters) => context.dataSource.query(query, parameters),
    async close() {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await closeContext(context);
      await database.drop();
    },
  };
}

/** A multipart upload: fields first, then files in order. */
export function uploadForm(
  files: Record<string, string | Uint8Array<ArrayBuffer>>,
  fields: Record<string, string> = {},
): FormData {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields)) form.append(name, value);
  for (const [name, content] of Object.entries(files)) form.append('files', new Blob([content]), name);
  return form;
}

/** Waits until a condition holds; fails after `patienceMs`. */
export async function until(
  condition: () => Promise<boolean>,
  what: string,
  patienceMs = 20_000,
): Promise<void> {
  const end = Date.now() + patienceMs;
  while (!(await condition())) {
    if (Date.now() > end) throw new Error(`It didn’t happen within ${patienceMs} ms: ${what}.`);
    await new Promise((resolve) => setTimeout(resolve, 25));
  }
}
