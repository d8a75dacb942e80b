import { createServer, connect, type Server, type Socket } from 'node:net';
import { mkdtempSync, mkdirSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { createApp } from '../../server/app.ts';
import { readConfig } from '../../server/config.ts';
import { Problem } from '../../shared/problem.ts';
import { Health } from '../../shared/session.ts';
import { createTestApp, until, type TestApp } from '../support/api.ts';

let app: TestApp;
beforeAll(async () => {
  const client = mkdtempSync(join(tmpdir(), 'perhertz-client-'));
  mkdirSync(join(client, 'assets'));
  writeFileSync(join(client, 'index.html'), '<!doctype html><title>page</title>');
  writeFileSync(join(client, 'assets', 'main-abc123.js'), 'export {};');
  app = await createTestApp({ PERHERTZ_CLIENT_DIR: client });
}, 30_000);
afterAll(() => app.close());

describe('every answer', () => {
  test.each([
    '/',
    '/captures/1',
    '/assets/main-abc123.js',
    '/api/health',
    '/api/session',
    '/api/nothing',
    '/assets/nothing.js',
  ])('carries the headers that protect a browser: %s', async (path) => {
    const { headers } = await app.nobody.call('GET', path);
    const policy = headers.get('content-security-policy') ?? '';
    expect(policy).toMatch(/script-src 'self'(;|$)/);
    expect(policy).toContain("frame-ancestors 'none'");
    expect(headers.get('x-content-type-options')).toBe('nosniff');
    expect(headers.get('x-powered-by')).toBeNull();
    expect(headers.get('x-request-id')).toMatch(/^[\da-f-]{36}$/);
  });
});

describe('the client', () => {
  test('is answered for every address of a screen, never cached', async () => {
    const response = await app.nobody.call('GET', '/captures/anything?zoom=1');
    expect(await response.text()).toContain('<title>page</title>');
    expect(response.headers.get('cache-control')).toBe('no-cache');
  });

  test('has assets that are kept for a year', async () => {
    const response = await app.nobody.call('GET', '/assets/main-abc123.js');
    expect(response.headers.get('cache-control')).toContain('immutable');
    expect(response.headers.get('set-cookie')).toBeNull();
  });

  test.each(['/assets/old-def456.js', '/api/nothing', '/api'])('isn’t answered for %s', async (path) => {
    const response = await (await app.as('engineer')).call('GET', path);
    expect(response.status).toBe(404);
    expect(response.headers.get('content-type')).toContain('application/problem+json');
    expect(Problem.parse(await response.json()).detail.length).toBeGreaterThan(10);
  });
});

describe('a request that can’t be used', () => {
  test.each([
    ['not JSON', '{"email": ', 400],
    ['too large', JSON.stringify({ email: 'x'.repeat(2_000_000) }), 413],
    ['wrong fields', '{"name": 1}', 400],
    ['no object', '[]', 400],
    ['nothing', '', 400],
  ])('is a problem document, never 500: %s', async (_what, body, status) => {
    const response = await app.nobody.call('POST', '/api/session', {
      body,
      headers: { 'Content-Type': 'application/json' },
    });
    expect(response.status).toBe(status);
    const problem = Problem.parse(await response.json());
    expect(problem.status).toBe(status);
    expect(problem.requestId).toBe(response.headers.get('x-request-id'));
  });
});

test('an unexpected error says its number and nothing of the inside', async () => {
  const dataSource = Object.create(app.context.dataSource, {
    query: {
      value: () => {
        throw new Error('secret inside');
      },
    },
  });
  const broken = createApp({ ...app.context, dataSource });
  const server = broken.listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  const address = server.address();
  const port = typeof address === 'object' ? address?.port : 0;
  const response = await fetch(`http://127.0.0.1:${port}/api/labs/x/campaigns`, {
    headers: { Authorization: 'Bearer perhertz_x' },
  });
  expect(response.status).toBe(500);
  const text = await response.text();
  expect(text).not.toContain('secret inside');
  expect(text).toContain(String(response.headers.get('x-request-id')));
  server.close();
});

describe('cookies', () => {
  const production = {
    NODE_ENV: 'production',
    DATABASE_URL: 'postgres://u@h/d',
    SESSION_SECRET: 'x'.repeat(16),
  };

  test('are secure in production, save on loopback without a proxy', () => {
    expect(readConfig({ ...production, HOST: '0.0.0.0' }).secureCookies).toBe(true);
    expect(readConfig({ ...production, PERHERTZ_TRUST_PROXY: '1' }).secureCookies).toBe(true);
    expect(readConfig(production).secureCookies).toBe(false);
  });
});

/** A door in front of the database that can be shut. */
class Door {
  readonly #target: URL;
  readonly #sockets = new Set<Socket>();
  #server: Server | null = null;
  port = 0;

  constructor(target: string) {
    this.#target = new URL(target);
  }

  open(): Promise<void> {
    this.#server = createServer((inner) => {
      const outer = connect(Number(this.#target.port), this.#target.hostname);
      for (const socket of [inner, outer]) {
        this.#sockets.add(socket);
        socket.on('error', () => {});
      }
      inner.pipe(outer).pipe(inner);
    });
    return new Promise((resolve) =>
      this.#server?.listen(this.port, '127.0.0.1', () => {
        const address = this.#server?.address();
        this.port = typeof address === 'object' ? (address?.port ?? 0) : 0;
        resolve();
      }),
    );
  }

  shut(): void {
    this.#server?.close();
    for (const socket of this.#sockets) socket.destroy();
    this.#sockets.clear();
  }
}

test('while the database is away the answer is 503, and all is well again afterwards', async () => {
  const cluster = String(process.env.DATABASE_URL);
  const door = new Door(cluster);
  await door.open();
  const through = new URL(cluster);
  through.host = `127.0.0.1:${door.port}`;
  process.env.DATABASE_URL = through.href;
  const away = await createTestApp().finally(() => {
    process.env.DATABASE_URL = cluster;
  });
  const engineer = await away.as('engineer');
  expect((await engineer.call('GET', '/api/session')).status).toBe(200);
  door.shut();
  const answers = await Promise.all([
    engineer.call('GET', '/api/session'),
    engineer.call('GET', `/api/labs/${await away.labOf('engineer')}/captures`),
  ]);
  expect(answers.map(({ status }) => status)).toEqual([503, 503]);
  expect(Number(answers[0].headers.get('retry-after'))).toBeGreaterThan(0);
  const health = await away.nobody.call('GET', '/api/health');
  expect(health.status).toBe(503);
  expect(Health.parse(await health.json())).toMatchObject({ status: 'degraded', database: false });
  await door.open();
  await until(
    async () => (await engineer.call('GET', '/api/session')).status === 200,
    'the application recovers',
  );
  await until(async () => away.context.events.listening, 'events are followed again');
  await away.close();
  door.shut();
}, 30_000);
