import { spawn, type ChildProcess } from 'node:child_process';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import { Capture } from '../../shared/capture.ts';
import { createTestApp, until, type TestApp } from '../support/api.ts';
import { traceCsv } from '../support/trace-csv.ts';

/** A worker process starts from the sources; a busy machine takes its time. */
const PATIENCE_MS = 60_000;

let app: TestApp;
const workers = new Set<ChildProcess>();
beforeAll(async () => {
  app = await createTestApp();
});
afterEach(async () => {
  await Promise.all([...workers].map((worker) => stop(worker, 'SIGKILL')));
});
afterAll(() => app.close());

function startWorker(): ChildProcess {
  const worker = spawn(process.execPath, ['--import', 'tsx', 'server/worker.ts'], {
    env: { ...process.env, DATABASE_URL: app.databaseUrl, LOG_LEVEL: process.env.TEST_LOG ?? 'fatal' },
    stdio: 'inherit',
  });
  workers.add(worker);
  return worker;
}

async function stop(worker: ChildProcess, signal: NodeJS.Signals): Promise<number | null> {
  const ended = new Promise<number | null>((resolve) => worker.once('exit', resolve));
  if (worker.exitCode !== null || worker.signalCode !== null) return worker.exitCode;
  worker.kill(signal);
  workers.delete(worker);
  return ended;
}

const read = async (id: string | null) => (await app.as('engineer')).get(Capture, `/api/captures/${id}`);
const leftReading = async (id: string | null) => !['received', 'reading'].includes((await read(id)).state);

describe('the worker', () => {
  test('reads a capture and makes the estimate on arrival', async () => {
    const [item] = await app.upload('engineer', { 'clean.csv': traceCsv({ points: 1001 }) });
    await app.work();
    const capture = await read(item.id);
    expect(capture.state).toBe('ready');
    expect(capture).toMatchObject({ points: 1001, centreHz: 75_000_000, spanHz: 10_000_000 });
    expect(capture.traces).toHaveLength(1);
    expect(capture.traces[0]).toMatchObject({
      points: 1001,
      firstHz: 70e6,
      lastHz: 80e6,
      spacingHz: 10_000,
      unit: 'dBm',
    });
    expect(capture.settings.rbwHz).toMatchObject({ value: 10_000, origin: { kind: 'file', line: 1 } });
    expect(capture.estimates).toHaveLength(1);
    expect(capture.estimate).toMatchObject({ number: 1, change: 'As uploaded', createdBy: 'on arrival' });
    expect(capture.estimate?.dbmPerHz).toBeLessThan(-130);
    expect(capture.sparkline?.min).toHaveLength(96);
  });

  test('asks for the settings that it can’t do without', async () => {
    const [item] = await app.upload('engineer', { 'bare.csv': traceCsv({ preamble: [], seed: 2 }) });
    await app.work();
    const capture = await read(item.id);
    expect(capture.state).toBe('needsSettings');
    expect(capture.estimate?.dbmPerHz).toBeNull();
  });

  test.each([
    ['empty', ''],
    [
      'a picture',
      Buffer.from('89504e470d0a1a0a0000000d49484452000001000000010008060000005c72a866', 'hex').toString(
        'latin1',
      ),
    ],
    ['a web page', '<!doctype html><html><body><p>Sign in to download</p></body></html>'],
  ])('says what to do with %s', async (name, content) => {
    const [item] = await app.upload('engineer', { [`${name}.csv`]: content });
    await app.work();
    const capture = await read(item.id);
    expect(capture.state).toBe('unreadable');
    expect(capture.problem?.severity).toBe('stop');
    expect(capture.problem?.message.length).toBeGreaterThan(10);
    expect(capture.problem?.advice.length).toBeGreaterThan(10);
    expect(capture.estimates).toEqual([]);
  });

  test('does nothing a second time', async () => {
    const [item] = await app.upload('engineer', { 'twice.csv': traceCsv({ seed: 3 }) });
    await app.work();
    const before = await read(item.id);
    await app.sql(
      `SELECT graphile_worker.add_job('read-capture', json_build_object('captureId', $1::text))`,
      [item.id],
    );
    await app.work();
    expect(await read(item.id)).toEqual(before);
  });

  test('never leaves a capture in reading when its tries are used up', async () => {
    const { rescueCaptures } = await import('../../server/services/rescue-captures.ts');
    const [item] = await app.upload('engineer', { 'used-up.csv': traceCsv({ seed: 4 }) });
    await app.sql(`UPDATE graphile_worker._private_jobs SET attempts = max_attempts WHERE key = $1`, [
      item.id,
    ]);
    await app.sql(`UPDATE capture SET updated_at = now() - interval '1 minute' WHERE id = $1`, [item.id]);
    await rescueCaptures(app.context.dataSource);
    expect((await read(item.id)).state).toBe('unreadable');
  });

  test('gets a job again that went missing', async () => {
    const { rescueCaptures } = await import('../../server/services/rescue-captures.ts');
    const [item] = await app.upload('engineer', { 'missing.csv': traceCsv({ seed: 5 }) });
    await app.sql(`DELETE FROM graphile_worker._private_jobs WHERE key = $1`, [item.id]);
    await app.sql(`UPDATE capture SET updated_at = now() - interval '1 minute' WHERE id = $1`, [item.id]);
    await rescueCaptures(app.context.dataSource);
    await app.work();
    expect((await read(item.id)).state).toBe('ready');
  });
});

describe('a worker process', () => {
  test('reads what comes, and ends at SIGTERM within ten seconds', async () => {
    const worker = startWorker();
    const [item] = await app.upload('engineer', { 'process.csv': traceCsv({ seed: 6 }) });
    await until(() => leftReading(item.id), 'the capture is read', PATIENCE_MS);
    expect((await read(item.id)).state).toBe('ready');
    const asked = Date.now();
    expect(await stop(worker, 'SIGTERM')).toBe(0);
    expect(Date.now() - asked).toBeLessThan(10_000);
    expect(await app.sql('SELECT 1 FROM worker_heartbeat')).toEqual([]);
  }, 90_000);

  test('killed in the middle of reading: the next one ends it ready, once', async () => {
    const rows = traceCsv({ points: 20_000, sweeps: 1, seed: 7 }).split('\n');
    const data = rows.slice(6, -1);
    const long = Array.from({ length: 40 }, (_, block) =>
      data
        .map((row, index) => `${70_000_000 + (block * 20_000 + index) * 10},${row.split(',')[1]}`)
        .join('\n'),
    );
    const file = [...rows.slice(0, 4), 'Points,800000', rows[5], ...long, ''].join('\n');
    const [item] = await app.upload('engineer', { 'long.csv': file });
    const first = startWorker();
    await until(async () => (await read(item.id)).state === 'reading', 'reading begins', PATIENCE_MS);
    await stop(first, 'SIGKILL');
    expect((await read(item.id)).state).toBe('reading');
    const [locked] = await app.sql<{ locked: boolean }>(
      'SELECT locked_at IS NOT NULL AS locked FROM graphile_worker.jobs WHERE key = $1',
      [item.id],
    );
    expect(locked.locked).toBe(true);
    const second = startWorker();
    await until(() => leftReading(item.id), 'the capture is read by the second worker', PATIENCE_MS);
    await stop(second, 'SIGTERM');
    const capture = await read(item.id);
    expect(capture.state).toBe('ready');
    expect(capture.points).toBe(800_000);
    expect(capture.traces).toHaveLength(1);
    expect(capture.estimates).toHaveLength(1);
    expect(await app.sql('SELECT 1 FROM graphile_worker.jobs WHERE key = $1', [item.id])).toEqual([]);
  }, 150_000);

  test('frees what a worker on another machine left behind, within seconds', async () => {
    const [item] = await app.upload('engineer', { 'elsewhere.csv': traceCsv({ seed: 8 }) });
    await app.sql(
      `INSERT INTO worker_heartbeat (id, host, pid, lock_names, seen_at)
       VALUES (gen_random_uuid(), 'another-machine', 1, '{worker-dead}', now() - interval '5 seconds')`,
    );
    await app.sql(
      `UPDATE graphile_worker._private_jobs SET locked_by = 'worker-dead', locked_at = now() WHERE key = $1`,
      [item.id],
    );
    startWorker();
    await until(() => leftReading(item.id), 'the freed capture is read', PATIENCE_MS);
    expect((await read(item.id)).state).toBe('ready');
  }, 90_000);
});
