import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { z } from 'zod';
import { Capture, Points } from '../../shared/capture.ts';
import { Estimate } from '../../shared/estimate.ts';
import { createTestApp, type Caller, type TestApp } from '../support/api.ts';
import { traceCsv } from '../support/trace-csv.ts';

const POINTS = 1001;
const CONTENT = traceCsv({ points: POINTS, seed: 21 });
const ROWS = CONTENT.split('\n')
  .slice(6, -1)
  .map((row) => row.split(',').map(Number));

let app: TestApp;
let engineer: Caller;
let captureId: string;
beforeAll(async () => {
  app = await createTestApp();
  engineer = await app.as('engineer');
  const [item] = await app.upload('technician', { '=strip 21.csv': CONTENT });
  await app.work();
  captureId = z.string().parse(item.id);
}, 30_000);
afterAll(() => app.close());

const capture = () => engineer.get(Capture, `/api/captures/${captureId}`);
const whatIf = (json: object) =>
  engineer.json(Estimate, 'POST', `/api/captures/${captureId}/estimates?keep=false`, { json });
const keep = (json: object) =>
  engineer.json(Estimate, 'POST', `/api/captures/${captureId}/estimates`, { json, status: 201 });

describe('an estimate', () => {
  test('that isn’t kept has no number and leaves nothing behind', async () => {
    const before = await capture();
    const estimate = await whatIf({ settings: { sweeps: 10 } });
    expect(estimate).toMatchObject({ id: null, number: null, state: null, createdAt: null, captureId });
    expect(estimate.settings.sweeps).toMatchObject({
      value: 10,
      origin: { kind: 'person', name: 'Mara Quillstead' },
    });
    expect(estimate.settings.rbwHz?.origin.kind).toBe('file');
    expect(await capture()).toEqual(before);
  });

  test('computed again from nothing new shows the digits of the one on arrival', async () => {
    const first = await engineer.get(Estimate, `/api/estimates/${(await capture()).estimates.at(-1)?.id}`);
    const again = await whatIf({});
    expect(again.density).toEqual(first.density);
    expect(again.ledger).toEqual(first.ledger);
    expect(again.input).toEqual(first.input);
    expect(again.input.sha256).toBe((await capture()).sha256);
  });

  test('that is kept gets the next number, an author and the change in words', async () => {
    const estimate = await keep({
      settings: { sweeps: 10, averagingScale: 'power' },
      exclusions: [{ fromHz: 71e6, toHz: 71.1e6, reason: 'carrier' }],
    });
    expect(estimate).toMatchObject({
      number: 2,
      state: 'working',
      createdBy: 'Mara Quillstead',
      change: 'Averaging power, 10 sweeps, 1 span left out',
    });
    const after = await capture();
    expect(after.estimates.map(({ number }) => number)).toEqual([2, 1]);
    expect(after.estimate?.id).toBe(estimate.id);
    expect(await engineer.get(Estimate, `/api/estimates/${estimate.id}`)).toEqual(estimate);
  });

  test('says so when nothing changed', async () => {
    const last = {
      settings: { sweeps: 10, averagingScale: 'power' },
      exclusions: [{ fromHz: 71e6, toHz: 71.1e6, reason: 'carrier' }],
    };
    expect((await whatIf(last)).change).toBe('Recomputed, nothing changed');
  });

  test('kept ten times at once is numbered without gap or double', async () => {
    const before = (await capture()).estimates.length;
    const made = await Promise.all(
      Array.from({ length: 10 }, (_, index) => keep({ settings: { sweeps: index + 1 } })),
    );
    const numbers = made.map(({ number }) => Number(number)).sort((a, b) => a - b);
    expect(numbers).toEqual(numbers.map((_, index) => before + 1 + index));
  });

  test('changes with the capture’s own settings, which make none by themselves', async () => {
    const before = (await capture()).estimates.length;
    await engineer.json(Capture, 'PATCH', `/api/captures/${captureId}`, {
      json: { settings: { externalGainDb: 20 } },
    });
    expect((await capture()).estimates).toHaveLength(before);
    expect((await whatIf({})).settings.externalGainDb?.value).toBe(20);
    const back = await engineer.json(Capture, 'PATCH', `/api/captures/${captureId}`, {
      json: { settings: { externalGainDb: null } },
    });
    expect(back.settings.externalGainDb).toBeUndefined();
  });

  test.each([
    ['a trace that isn’t there', { traceIndex: 7 }, 'traceIndex'],
    ['a setting that isn’t one', { settings: { rbw: 1 } }, 'settings'],
    ['a value that isn’t one', { settings: { rbwHz: -1 } }, 'settings.rbwHz'],
    ['an exclusion without an end', { exclusions: [{ fromHz: 1 }] }, 'exclusions.0.toHz'],
  ])('of %s is refused where it’s wrong', async (_what, json, path) => {
    const response = await engineer.call('POST', `/api/captures/${captureId}/estimates?keep=false`, { json });
    expect(response.status).toBe(400);
    const { errors } = z
      .object({ errors: z.array(z.object({ path: z.string() })) })
      .parse(await response.json());
    expect(errors.map((error) => error.path)).toContain(path);
  });

  test('of a capture that isn’t read waits: 409', async () => {
    const [item] = await app.upload('engineer', { 'waiting.csv': traceCsv({ seed: 22 }) });
    const response = await engineer.call('POST', `/api/captures/${item.id}/estimates`, { json: {} });
    expect(response.status).toBe(409);
  });

  test('lifts a capture out of needing settings', async () => {
    const [item] = await app.upload('engineer', { 'bare.csv': traceCsv({ seed: 23, preamble: [] }) });
    await app.work();
    const path = `/api/captures/${item.id}`;
    expect((await engineer.get(Capture, path)).state).toBe('needsSettings');
    await engineer.json(Estimate, 'POST', `${path}/estimates`, {
      json: {
        settings: {
          rbwHz: 10_000,
          rbwKind: '3dB',
          filterShape: 'gaussian',
          detector: 'sample',
          averagingScale: 'log',
          sweeps: 20,
        },
      },
      status: 201,
    });
    expect(await engineer.get(Capture, path)).toMatchObject({ state: 'ready', rbwHz: 10_000 });
  });
});

describe('the cleaned trace', () => {
  test('has every point with whether it was used, and cells that no spreadsheet runs', async () => {
    const kept = await keep({ exclusions: [{ fromHz: ROWS[10][0], toHz: ROWS[19][0] }] });
    const response = await engineer.call('GET', `/api/estimates/${kept.id}/trace.csv`);
    expect(response.headers.get('content-type')).toContain('text/csv');
    expect(response.headers.get('content-disposition')).toMatch(/^attachment; filename=/);
    const lines = (await response.text()).trimEnd().split('\r\n');
    const data = lines
      .slice(lines.indexOf('frequency_hz,level_dbm,used') + 1)
      .map((row) => row.split(',').map(Number));
    expect(data.map(([hz, level]) => [hz, level])).toEqual(ROWS);
    expect(data.slice(10, 20).every(([, , used]) => used === 0)).toBe(true);
    expect(data.filter(([, , used]) => used === 1)).toHaveLength(kept.input.usedPoints);
    expect(lines.every((line) => /^[#"\df]/.test(line))).toBe(true);
    expect(lines[0]).toContain(`HB-`);
  });
});

describe('points', () => {
  const path = (query: string) => `/api/captures/${captureId}/traces/0/points${query}`;

  test('are exact where they fit', async () => {
    const points = await engineer.get(Points, path(''));
    expect(points).toEqual({
      form: 'exact',
      unit: 'dBm',
      hz: ROWS.map(([hz]) => hz),
      level: ROWS.map(([, level]) => level),
    });
  });

  test('of a part of the span are those of the part, ends included', async () => {
    const points = await engineer.get(Points, path(`?fromHz=${ROWS[5][0]}&toHz=${ROWS[8][0]}`));
    expect(points.hz).toEqual(ROWS.slice(5, 9).map(([hz]) => hz));
  });

  test('are lowest and highest per bucket where they don’t fit', async () => {
    const points = await engineer.get(Points, path('?buckets=10'));
    if (points.form !== 'buckets') throw new Error('expected buckets');
    expect(points.hz).toHaveLength(10);
    expect(Math.min(...points.min)).toBe(Math.min(...ROWS.map(([, level]) => level)));
    expect(Math.max(...points.max)).toBe(Math.max(...ROWS.map(([, level]) => level)));
    const first = ROWS.slice(0, 100).map(([, level]) => level);
    expect([points.min[0], points.max[0]]).toEqual([Math.min(...first), Math.max(...first)]);
  });

  test.each([
    ['', 2, 'exact'],
    ['?buckets=10', 3, 'buckets'],
  ])('come as doubles too: %s', async (query, arrays, form) => {
    const response = await engineer.call('GET', path(query), {
      headers: { Accept: 'application/octet-stream' },
    });
    expect(response.headers.get('x-points-form')).toBe(form);
    expect(response.headers.get('x-level-unit')).toBe('dBm');
    const count = Number(response.headers.get('x-points-count'));
    const doubles = new Float64Array(await response.arrayBuffer());
    expect(doubles).toHaveLength(count * arrays);
    const json = await engineer.get(Points, path(query));
    expect([...doubles.slice(0, count)]).toEqual(json.hz);
    expect([...doubles.slice(count, 2 * count)]).toEqual(json.form === 'exact' ? json.level : json.min);
  });

  test.each([
    '/api/captures/ID/traces/1/points',
    '/api/captures/ID/traces/x/points',
    '/api/captures/ID/traces/-1/points',
  ])('of a trace that isn’t there: 404 %s', async (template) => {
    expect((await engineer.call('GET', template.replace('ID', captureId))).status).toBe(404);
  });

  test.each(['?buckets=0', '?buckets=200001', '?fromHz=low'])(
    'of a query that can’t be: 400 %s',
    async (query) => {
      expect((await engineer.call('GET', path(query))).status).toBe(400);
    },
  );
});
