import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { createTestApp, type TestApp } from '../support/api.ts';
import { traceCsv } from '../support/trace-csv.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
  await app.upload('engineer', { 'kept.csv': traceCsv() });
  await app.work();
}, 30_000);
afterAll(() => app.close());

test('migrations and entities describe the same database', async () => {
  const { upQueries } = await app.context.dataSource.driver.createSchemaBuilder().log();
  expect(upQueries.map(({ query }) => query)).toEqual([]);
});

describe('the database refuses', () => {
  test.each([
    ['changed bytes', `UPDATE capture_chunk SET bytes = 'x'`],
    ['bytes taken away', 'DELETE FROM capture_chunk'],
    ['bytes emptied', 'TRUNCATE capture_chunk'],
    ['another SHA-256', `UPDATE capture SET sha256 = 'x'`],
    [
      'another uploader',
      'UPDATE capture SET uploader_id = (SELECT id FROM person WHERE id <> uploader_id LIMIT 1)',
    ],
    ['a changed estimate', `UPDATE estimate SET body = '{}'`],
    ['another density', 'UPDATE estimate SET dbm_per_hz = -170'],
    ['another author', 'UPDATE estimate SET author_id = (SELECT id FROM person LIMIT 1)'],
    ['an estimate taken away', 'DELETE FROM estimate'],
    ['estimates emptied', 'TRUNCATE estimate CASCADE'],
    ['a capture with estimates taken away', 'DELETE FROM capture'],
    ['a changed trail', `UPDATE audit_entry SET action = 'nothing'`],
    ['a trail taken away', 'DELETE FROM audit_entry'],
    ['a trail emptied', 'TRUNCATE audit_entry'],
  ])('%s', async (_what, sql) => {
    await expect(app.sql(sql)).rejects.toThrow(
      /written once|never changes|only with their capture|foreign key/,
    );
  });
});

test('an estimate’s state alone may change', async () => {
  await app.sql(`UPDATE estimate SET state = 'submitted'`);
  await app.sql(`UPDATE estimate SET state = 'working'`);
});

test('a capture without estimates takes its bytes along', async () => {
  const [item] = await app.upload('engineer', { 'gone.csv': traceCsv({ seed: 2 }) });
  await app.sql('DELETE FROM capture WHERE id = $1', [item.id]);
  expect(await app.sql('SELECT 1 FROM capture_chunk WHERE capture_id = $1', [item.id])).toEqual([]);
});

test('the trail says who did what', async () => {
  const entries = await app.sql<{ action: string; name: string | null }>(
    'SELECT action, person.name FROM audit_entry LEFT JOIN person ON person.id = person_id ORDER BY audit_entry.id LIMIT 2',
  );
  expect(entries).toEqual([
    { action: 'capture.uploaded', name: 'Mara Quillstead' },
    { action: 'estimate.made', name: null },
  ]);
});
