import { createHash, randomBytes } from 'node:crypto';
import { connect } from 'node:net';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { z } from 'zod';
import { Capture, Campaign, UploadItem } from '../../shared/capture.ts';
import { page, Problem } from '../../shared/problem.ts';
import { createTestApp, until, uploadForm, type TestApp, cookiesOf } from '../support/api.ts';
import { traceCsv } from '../support/trace-csv.ts';

const MIB = 1024 * 1024;
const LIMIT = 6 * MIB;
const Items = z.object({ items: z.array(UploadItem) });

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp({ PERHERTZ_MAX_UPLOAD_BYTES: String(LIMIT), PERHERTZ_UPLOAD_IDLE_MS: '700' });
});
afterAll(() => app.close());

const counts = async () => {
  const [row] = await app.sql<{ captures: number; chunks: number; jobs: number }>(
    `SELECT (SELECT count(*) FROM capture)::int AS captures, (SELECT count(*) FROM capture_chunk)::int AS chunks,
       (SELECT count(*) FROM graphile_worker.jobs)::int AS jobs`,
  );
  return row;
};

const send = async (form: FormData) =>
  (await app.as('technician')).call('POST', `/api/labs/${await app.labOf('technician')}/captures`, {
    body: form,
  });

describe('an upload', () => {
  test.each([0, 1, MIB - 1, MIB, MIB + 1, 3 * MIB + 12_345])('keeps %i bytes as they are', async (length) => {
    const bytes = new Uint8Array(randomBytes(length));
    const [item] = await app.upload('technician', { 'made at random.bin': bytes });
    expect(item).toMatchObject({ state: 'received', duplicate: false, error: null });
    const technician = await app.as('technician');
    const capture = await technician.get(Capture, `/api/captures/${item.id}`);
    expect(capture.bytes).toBe(length);
    expect(capture.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    const file = await technician.call('GET', `/api/captures/${item.id}/file`);
    expect(Buffer.compare(Buffer.from(await file.arrayBuffer()), Buffer.from(bytes))).toBe(0);
    expect(file.headers.get('content-disposition')).toBe('attachment; filename="made at random.bin"');
    expect(file.headers.get('x-content-type-options')).toBe('nosniff');
  });

  test('stores bytes, capture and job together', async () => {
    const before = await counts();
    await app.upload('technician', { 'a.csv': traceCsv({ seed: 11 }) });
    const after = await counts();
    expect(after.captures - before.captures).toBe(1);
    expect(after.chunks - before.chunks).toBe(1);
    expect(after.jobs - before.jobs).toBe(1);
  });

  test('takes many files, numbered one after the other, names in any script', async () => {
    const files = Object.fromEntries(
      Array.from({ length: 25 }, (_, index) => [
        `Küste ${index} Ω.csv`,
        traceCsv({ seed: 100 + index, points: 30 }),
      ]),
    );
    const items = await app.upload('technician', files);
    expect(items.map(({ fileName }) => fileName)).toEqual(Object.keys(files));
    const technician = await app.as('technician');
    const captures = await Promise.all(items.map(({ id }) => technician.get(Capture, `/api/captures/${id}`)));
    const numbers = captures.map(({ number }) => Number(number.replace('HB-', '')));
    expect(numbers).toEqual(numbers.map((_, index) => numbers[0] + index));
    const file = await technician.call('GET', `/api/captures/${items[3].id}/file`);
    expect(file.headers.get('content-disposition')).toContain("filename*=UTF-8''K%C3%BCste%203%20%CE%A9.csv");
  });

  test('tells a duplicate and links to the earlier capture', async () => {
    const content = traceCsv({ seed: 12 });
    const [first] = await app.upload('technician', { 'one.csv': content });
    const before = await counts();
    const response = await send(uploadForm({ 'two.csv': content }));
    expect(response.status).toBe(200);
    const { items } = Items.parse(await response.json());
    expect(items).toEqual([expect.objectContaining({ id: first.id, duplicate: true, error: null })]);
    expect(await counts()).toEqual(before);
  });

  test('stores the same bytes once when they arrive eight times at once', async () => {
    const content = traceCsv({ seed: 13 });
    const before = await counts();
    const answers = await Promise.all(
      Array.from({ length: 8 }, () => app.upload('technician', { 'same.csv': content })),
    );
    const items = answers.flat();
    expect(new Set(items.map(({ id }) => id)).size).toBe(1);
    expect(items.filter(({ duplicate }) => !duplicate)).toHaveLength(1);
    expect((await counts()).captures - before.captures).toBe(1);
  });

  test('of the same bytes in another lab is another capture', async () => {
    const content = traceCsv({ seed: 14 });
    const [ours] = await app.upload('technician', { 'x.csv': content });
    const [theirs] = await app.upload('foreigner', { 'x.csv': content });
    expect(theirs.duplicate).toBe(false);
    expect(theirs.id).not.toBe(ours.id);
  });

  test('numbers captures without gap or double under load', async () => {
    const before = await counts();
    await Promise.all(
      Array.from({ length: 20 }, (_, index) =>
        app.upload('technician', { [`load ${index}.csv`]: traceCsv({ seed: 300 + index, points: 20 }) }),
      ),
    );
    expect((await counts()).captures - before.captures).toBe(20);
    const [numbers] = await app.sql<{ all: number; distinct: number; span: number }>(
      `SELECT count(*)::int AS all, count(DISTINCT number)::int AS distinct,
         (max(split_part(number, '-', 2)::int) - min(split_part(number, '-', 2)::int) + 1)::int AS span
       FROM capture WHERE number LIKE 'HB-%'`,
    );
    expect(numbers.distinct).toBe(numbers.all);
    expect(numbers.span).toBe(numbers.all);
  });
});

test('two hundred uploads at once: each is stored whole or refused with Retry-After, and the rest goes on', async () => {
  const before = await counts();
  const uploads = Array.from({ length: 200 }, (_, index) =>
    send(uploadForm({ [`crowd ${index}.csv`]: traceCsv({ seed: 1000 + index, points: 20, sweeps: 1 }) })),
  );
  const light = await app.nobody.call('GET', '/api/health');
  expect(light.status).toBe(200);
  const answers = await Promise.all(uploads);
  const stored = answers.filter(({ status }) => status === 201);
  const refused = answers.filter(({ status }) => status === 503);
  expect(stored.length + refused.length).toBe(200);
  expect(stored.length).toBeGreaterThan(0);
  expect(refused.every(({ headers }) => Number(headers.get('retry-after')) > 0)).toBe(true);
  const after = await counts();
  expect([after.captures - before.captures, after.chunks - before.chunks, after.jobs - before.jobs]).toEqual([
    stored.length,
    stored.length,
    stored.length,
  ]);
});

describe('fields', () => {
  test('campaign and settings go onto each file', async () => {
    const technician = await app.as('technician');
    const { items: campaigns } = await technician.get(
      page(Campaign),
      `/api/labs/${await app.labOf('technician')}/campaigns`,
    );
    const [item] = await app.upload(
      'technician',
      { 'f.csv': traceCsv({ seed: 15 }) },
      { campaignId: campaigns[0].id, settings: '{"rbwHz": 3000}' },
    );
    const capture = await technician.get(Capture, `/api/captures/${item.id}`);
    expect(capture.campaign?.id).toBe(campaigns[0].id);
    expect(capture.settings.rbwHz).toMatchObject({
      value: 3000,
      origin: { kind: 'person', name: 'Tobias Fennimarsh' },
    });
  });

  test('hold when they come behind the files', async () => {
    const form = uploadForm({ 'g.csv': traceCsv({ seed: 16 }) });
    form.append('settings', '{"rbwHz": 3000}');
    const { items } = Items.parse(await (await send(form)).json());
    await app.work();
    const capture = await (await app.as('technician')).get(Capture, `/api/captures/${items[0].id}`);
    expect(capture.settings.rbwHz?.value).toBe(3000);
    expect(capture.rbwHz).toBe(3000);
  });

  test.each([
    ['settings', '{"rbwHz": "wide"}', 'rbwHz'],
    ['settings', '{"rbw": 1}', 'rbw'],
    ['settings', 'not JSON', 'JSON'],
    ['campaignId', '01a231b0-a51a-73eb-924f-808ae5248ed0', 'campaign'],
    ['campaignId', 'x', 'campaignId'],
    ['unheardOf', 'x', 'unheardOf'],
  ])('that can’t be used store nothing: %s %s', async (name, value, said) => {
    const before = await counts();
    const response = await send(uploadForm({ 'h.csv': traceCsv({ seed: 17 }) }, { [name]: value }));
    expect(response.status).toBe(400);
    expect(Problem.parse(await response.json()).detail).toContain(said);
    expect(await counts()).toEqual(before);
  });
});

describe('an upload that goes wrong', () => {
  test('too large: refused, with the limit, and nothing is left', async () => {
    const before = await counts();
    const response = await send(uploadForm({ 'large.bin': new Uint8Array(LIMIT + 1) }));
    expect(response.status).toBe(413);
    expect(Problem.parse(await response.json()).detail).toContain('6 MiB');
    expect(await counts()).toEqual(before);
  });

  test('too large beside others: the others are stored', async () => {
    const response = await send(
      uploadForm({ 'large.bin': new Uint8Array(LIMIT + 1), 'fine.csv': traceCsv({ seed: 18 }) }),
    );
    expect(response.status).toBe(201);
    const { items } = Items.parse(await response.json());
    expect(items[0]).toMatchObject({ fileName: 'large.bin', id: null });
    expect(items[0].error).toContain('6 MiB');
    expect(items[1]).toMatchObject({ fileName: 'fine.csv', error: null });
  });

  test.each([
    ['no file', new FormData()],
    ['no form', 'just text'],
  ])('%s: a sentence', async (_what, body) => {
    const technician = await app.as('technician');
    const response = await technician.call('POST', `/api/labs/${await app.labOf('technician')}/captures`, {
      body,
    });
    expect(response.status).toBe(400);
    expect(Problem.parse(await response.json()).detail.length).toBeGreaterThan(20);
  });

  const startRaw = async (announced: number) => {
    const { port } = new URL(app.baseUrl);
    const response = await app.nobody.call('POST', '/api/session', {
      json: { email: 'technician@harbourbench.example', password: 'quiet-floor-demo' },
    });
    const cookie = cookiesOf(response);
    const socket = connect(Number(port), '127.0.0.1');
    socket.on('error', () => {});
    socket.write(
      `POST /api/labs/${await app.labOf('technician')}/captures HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nCookie: ${cookie}\r\n` +
        `Content-Type: multipart/form-data; boundary=xyz\r\nContent-Length: ${announced}\r\n\r\n` +
        '--xyz\r\nContent-Disposition: form-data; name="files"; filename="slow.csv"\r\nContent-Type: text/csv\r\n\r\n',
    );
    return socket;
  };
  const idleInTransaction = async () => {
    const [row] = await app.sql<{ count: number }>(
      `SELECT count(*)::int AS count FROM pg_stat_activity
       WHERE datname = current_database() AND state = 'idle in transaction'`,
    );
    return row.count;
  };

  test('broken off in the middle: nothing is left, and no transaction stays open', async () => {
    const before = await counts();
    const socket = await startRaw(5 * MIB);
    socket.write(Buffer.alloc(3 * MIB, 'a'));
    await until(async () => (await idleInTransaction()) > 0, 'the upload writes');
    socket.destroy();
    await until(async () => (await idleInTransaction()) === 0, 'the transaction ends');
    expect(await counts()).toEqual(before);
  });

  test('stalled: ended with a sentence, and nothing is left', async () => {
    const before = await counts();
    const socket = await startRaw(5 * MIB);
    socket.write(Buffer.alloc(2 * MIB, 'a'));
    let answer = '';
    socket.on('data', (data) => (answer += String(data)));
    await until(async () => answer.includes('}'), 'the stalled upload is answered');
    expect(answer).toContain('HTTP/1.1 408');
    expect(answer).toContain('send the file again');
    await until(async () => (await idleInTransaction()) === 0, 'the transaction ends');
    expect(await counts()).toEqual(before);
    socket.destroy();
  });
});
