import { spawnSync } from 'node:child_process';
import { chmodSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Client } from 'pg';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { startCluster } from '../../server/commands/lib/cluster.mjs';
import { Ending } from '../../server/commands/lib/ending.mjs';
import { runningPostmaster } from '../../server/commands/lib/postmaster.mjs';
import { until } from '../support/api.ts';

let folder: string;
let ending: Ending;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'perhertz-cluster-'));
  chmodSync(folder, 0o711);
  ending = new Ending();
});
afterEach(async () => {
  await ending.run();
  rmSync(folder, { recursive: true, force: true });
});

async function query(url: string, sql: string): Promise<unknown[]> {
  const client = new Client({ connectionString: url });
  client.on('error', () => {});
  await client.connect();
  const { rows } = await client.query(sql);
  await client.end();
  return rows;
}

async function restart(): Promise<string> {
  await ending.run();
  ending = new Ending();
  return (await startCluster(ending, folder)).url;
}

test('a cluster keeps its data, its port and its password from start to start', async () => {
  const first = await startCluster(ending, folder);
  await query(first.url, 'CREATE TABLE kept AS SELECT 42 AS answer');
  expect(await restart()).toBe(first.url);
  expect(await query(first.url, 'SELECT answer FROM kept')).toEqual([{ answer: 42 }]);
  expect(statSync(join(folder, 'database-password')).mode & 0o077).toBe(0);
});

test('nothing runs once the command has ended', async () => {
  const { folder: data, url } = await startCluster(ending, folder);
  expect(runningPostmaster(data)).not.toBeNull();
  await ending.run();
  expect(runningPostmaster(data)).toBeNull();
  await expect(query(url, 'SELECT 1')).rejects.toThrow();
});

test('a pid file of a crash doesn’t keep it from starting, though its number belongs to another process', async () => {
  const { folder: data } = await startCluster(ending, folder);
  const pidFile = readFileSync(join(data, 'postmaster.pid'), 'utf8').split('\n');
  await ending.run();
  writeFileSync(join(data, 'postmaster.pid'), [process.pid, ...pidFile.slice(1)].join('\n'));
  expect(await query(await restart(), 'SELECT 1 AS one')).toEqual([{ one: 1 }]);
});

test('a cluster that a killed command has left running is taken over, and stopped at the end', async () => {
  const lib = new URL('../../server/commands/lib/', import.meta.url).href;
  const script = `
    const { startCluster } = await import('${lib}cluster.mjs');
    const { Ending } = await import('${lib}ending.mjs');
    await startCluster(new Ending(), process.argv[1]);
    process.kill(process.pid, 'SIGKILL');`;
  const { signal } = spawnSync(process.execPath, ['--input-type=module', '-e', script, folder], {
    encoding: 'utf8',
  });
  expect(signal).toBe('SIGKILL');
  const left = runningPostmaster(join(folder, 'postgres'));
  expect(left).not.toBeNull();
  expect((await startCluster(ending, folder)).port).toBe(left?.port);
  await ending.run();
  expect(runningPostmaster(join(folder, 'postgres'))).toBeNull();
});

test('a PostgreSQL that is killed comes back on the same port with what was committed', async () => {
  const { folder: data, url } = await startCluster(ending, folder);
  await query(url, 'CREATE TABLE committed AS SELECT 7 AS n');
  process.kill(runningPostmaster(data)?.pid ?? 0, 'SIGKILL');
  const answers = () =>
    query(url, 'SELECT n FROM committed').then(
      (rows) => rows.length === 1,
      () => false,
    );
  await until(async () => runningPostmaster(data) === null, 'PostgreSQL is gone');
  await until(answers, 'PostgreSQL is back');
});

test('the application’s role is no superuser', async () => {
  const { url } = await startCluster(ending, folder);
  const sql = 'SELECT rolname, rolsuper FROM pg_roles WHERE rolname = current_user';
  expect(await query(url, sql)).toEqual([{ rolname: 'perhertz', rolsuper: false }]);
});

test('a throw-away cluster takes its folder with it', async () => {
  await startCluster(ending, folder, { throwAway: true });
  await ending.run();
  expect(() => statSync(folder)).toThrow();
});
