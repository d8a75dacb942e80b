import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Express } from 'express';
import { z } from 'zod';
import { NewToken } from '../../shared/session.ts';
import { Problem } from '../../shared/problem.ts';
import { Capture } from '../../shared/capture.ts';
import { createTestApp, uploadForm, type TestApp, type Who } from '../support/api.ts';
import { traceCsv } from '../support/trace-csv.ts';

type Asker = Who | 'nobody';

const ASKERS: Asker[] = ['technician', 'engineer', 'reviewer', 'administrator', 'foreigner', 'nobody'];

interface Row {
  /** The request, made for objects of the first lab. */
  send: (objects: Objects) => { path: string; json?: unknown; body?: () => FormData };
  /** Status for each asker; `members` stands for every role of the lab. */
  expected: { members: number; foreigner: number; nobody: number } & Partial<Record<Who, number>>;
}

interface Objects {
  labId: string;
  /** In every state that a capture can rest in. */
  captures: Record<string, string>;
  captureId: string;
  estimateId: string;
  tokenOf: Record<string, string>;
}

const inLab = (members: number) => ({ members, foreigner: 404, nobody: 401 });
const everybody = { members: 200, foreigner: 200, nobody: 401 };
const ABSENT = '01a231b0-a51a-73eb-924f-808ae5248ed0';

/** Every route of the application has a row; the test fails for one that hasn't. */
const MATRIX: Record<string, Row> = {
  'GET /api/session': { send: () => ({ path: '/api/session' }), expected: everybody },
  'GET /api/tokens': { send: () => ({ path: '/api/tokens' }), expected: everybody },
  'POST /api/tokens': {
    send: ({ labId }) => ({ path: '/api/tokens', json: { name: 'matrix', labId } }),
    expected: inLab(201),
  },
  'DELETE /api/tokens/:tokenId': {
    send: ({ tokenOf }) => ({ path: `/api/tokens/${tokenOf.engineer}` }),
    expected: { ...inLab(404), engineer: 204, administrator: 204 },
  },
  'GET /api/labs/:labId/campaigns': {
    send: ({ labId }) => ({ path: `/api/labs/${labId}/campaigns` }),
    expected: inLab(200),
  },
  'POST /api/labs/:labId/campaigns': {
    send: ({ labId }) => ({
      path: `/api/labs/${labId}/campaigns`,
      json: { name: `Matrix ${Math.random()}` },
    }),
    expected: inLab(201),
  },
  'GET /api/labs/:labId/captures': {
    send: ({ labId }) => ({ path: `/api/labs/${labId}/captures` }),
    expected: inLab(200),
  },
  'POST /api/labs/:labId/captures': {
    send: ({ labId }) => ({
      path: `/api/labs/${labId}/captures`,
      body: () => uploadForm({ 'm.csv': `${Math.random()}` }),
    }),
    expected: inLab(201),
  },
  'GET /api/captures/:captureId': {
    send: ({ captureId }) => ({ path: `/api/captures/${captureId}` }),
    expected: inLab(200),
  },
  'PATCH /api/captures/:captureId': {
    send: ({ captureId }) => ({ path: `/api/captures/${captureId}`, json: { name: 'Matrix' } }),
    expected: inLab(200),
  },
  'GET /api/captures/:captureId/file': {
    send: ({ captureId }) => ({ path: `/api/captures/${captureId}/file` }),
    expected: inLab(200),
  },
  'GET /api/captures/:captureId/traces/:index/points': {
    send: ({ captureId }) => ({ path: `/api/captures/${captureId}/traces/0/points` }),
    expected: inLab(200),
  },
  'POST /api/captures/:captureId/estimates': {
    send: ({ captureId }) => ({ path: `/api/captures/${captureId}/estimates`, json: {} }),
    expected: inLab(201),
  },
  'GET /api/estimates/:estimateId': {
    send: ({ estimateId }) => ({ path: `/api/estimates/${estimateId}` }),
    expected: inLab(200),
  },
  'GET /api/estimates/:estimateId/trace.csv': {
    send: ({ estimateId }) => ({ path: `/api/estimates/${estimateId}/trace.csv` }),
    expected: inLab(200),
  },
  'GET /api/events': { send: () => ({ path: '/api/events' }), expected: everybody },
};

/** Routes that ask nobody who they are, or that end the asker's session. */
const WITHOUT_ROW = ['GET /api/health', 'POST /api/session', 'DELETE /api/session', 'GET /{*path}'];

const Layers = z.array(
  z.object({
    route: z.object({ path: z.string(), methods: z.record(z.string(), z.boolean()) }).optional(),
    handle: z.custom<{ stack?: unknown }>((value) => typeof value === 'function'),
  }),
);

function routesOf(stack: unknown): string[] {
  return Layers.parse(stack).flatMap(({ route, handle }) => {
    if (route) return Object.keys(route.methods).map((method) => `${method.toUpperCase()} ${route.path}`);
    return handle.stack === undefined ? [] : routesOf(handle.stack);
  });
}

const allRoutes = (app: Express) => routesOf(app.router.stack);

let app: TestApp;
let objects: Objects;

const callerFor = (asker: Asker) => (asker === 'nobody' ? Promise.resolve(app.nobody) : app.as(asker));

async function makeToken(who: Who): Promise<string> {
  const json = { name: 'matrix', labId: await app.labOf(who) };
  return (await (await app.as(who)).json(NewToken, 'POST', '/api/tokens', { json, status: 201 })).id;
}

beforeAll(async () => {
  app = await createTestApp();
  const [ready, needsSettings, unreadable] = await app.upload('technician', {
    'ready.csv': traceCsv({ seed: 1 }),
    'bare.csv': traceCsv({ seed: 2, preamble: [] }),
    'empty.csv': '',
  });
  await app.work();
  const [received] = await app.upload('technician', { 'received.csv': traceCsv({ seed: 3 }) });
  const captureId = z.string().parse(ready.id);
  const capture = await (await app.as('engineer')).get(Capture, `/api/captures/${captureId}`);
  objects = {
    labId: await app.labOf('engineer'),
    captureId,
    captures: z.record(z.string(), z.string()).parse({
      ready: ready.id,
      needsSettings: needsSettings.id,
      unreadable: unreadable.id,
      received: received.id,
    }),
    estimateId: z.string().parse(capture.estimate?.id),
    tokenOf: {},
  };
}, 30_000);
afterAll(() => app.close());

test('every route has a row in the matrix, and every row a route', () => {
  const routes = new Set(allRoutes(app.app));
  expect(routes.size).toBeGreaterThan(15);
  expect([...routes].sort()).toEqual([...new Set([...Object.keys(MATRIX), ...WITHOUT_ROW])].sort());
});

describe.each(Object.entries(MATRIX))('%s', (route, { send, expected }) => {
  test.each(ASKERS)('asked by %s', async (asker) => {
    const caller = await callerFor(asker);
    objects.tokenOf.engineer = await makeToken('engineer');
    const { path, json, body } = send(objects);
    const method = route.split(' ')[0];
    const ending = new AbortController();
    const response = await caller.call(method, path, { json, body: body?.(), signal: ending.signal });
    const want =
      asker === 'foreigner' || asker === 'nobody' ? expected[asker] : (expected[asker] ?? expected.members);
    expect(response.status).toBe(want);
    ending.abort();
  });
});

describe('a foreign object', () => {
  const paths = (captureId: string, estimateId: string, labId: string): [string, string, unknown?][] => [
    ['GET', `/api/captures/${captureId}`],
    ['PATCH', `/api/captures/${captureId}`, { name: 'mine now' }],
    ['GET', `/api/captures/${captureId}/file`],
    ['GET', `/api/captures/${captureId}/traces/0/points`],
    ['POST', `/api/captures/${captureId}/estimates`, {}],
    ['POST', `/api/captures/${captureId}/estimates?keep=false`, {}],
    ['GET', `/api/estimates/${estimateId}`],
    ['GET', `/api/estimates/${estimateId}/trace.csv`],
    ['GET', `/api/labs/${labId}/captures`],
    ['GET', `/api/labs/${labId}/campaigns`],
  ];

  test('answers in every state exactly as one that isn’t there', async () => {
    const foreigner = await app.as('foreigner');
    const answer = async ([method, path, json]: [string, string, unknown?]) => {
      const response = await foreigner.call(method, path, { json });
      const body = Problem.omit({ requestId: true }).parse(await response.json());
      return { status: response.status, body };
    };
    const absent = await Promise.all(paths(ABSENT, ABSENT, ABSENT).map(answer));
    expect(absent.map(({ status }) => status)).toEqual(absent.map(() => 404));
    for (const captureId of Object.values(objects.captures)) {
      expect(await Promise.all(paths(captureId, objects.estimateId, objects.labId).map(answer))).toEqual(
        absent,
      );
    }
  });

  test.each(['not-an-id', '0', "'; DROP TABLE capture; --", '%00'])(
    'with the id %s is absent too',
    async (id) => {
      const engineer = await app.as('engineer');
      const statuses = await Promise.all(
        paths(id, id, id).map(
          async ([method, path, json]) => (await engineer.call(method, encodeURI(path), { json })).status,
        ),
      );
      expect(statuses).toEqual(statuses.map(() => 404));
    },
  );

  test('can’t be reached through one’s own: a campaign of another lab', async () => {
    const [{ id }] = await app.sql<{ id: string }>(
      "SELECT campaign.id FROM campaign JOIN lab ON lab.id = lab_id WHERE lab.name LIKE 'Tallow%'",
    );
    const engineer = await app.as('engineer');
    const moved = await engineer.call('PATCH', `/api/captures/${objects.captureId}`, {
      json: { campaignId: id },
    });
    expect(moved.status).toBe(400);
  });
});
