import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { Ending } from '../../server/commands/lib/ending.mjs';
import { packagesAreInstalled } from '../../server/commands/lib/node-packages.mjs';
import { beTheOnlyOne, chosenPort } from '../../server/commands/lib/one-instance.mjs';
import { findPostgresPrograms } from '../../server/commands/lib/postgres-programs.mjs';
import { restartDelayMs, runProgram, supervise } from '../../server/commands/lib/processes.mjs';
import { until } from '../support/api.ts';

let folder: string;
let ending: Ending;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'perhertz-preparation-'));
  ending = new Ending();
});
afterEach(async () => {
  await ending.run();
  rmSync(folder, { recursive: true, force: true });
});

describe('installed packages', () => {
  const write = (wanted: object, installed: object | null) => {
    mkdirSync(join(folder, 'node_modules'));
    writeFileSync(join(folder, 'package-lock.json'), JSON.stringify({ packages: wanted }));
    if (installed) {
      writeFileSync(
        join(folder, 'node_modules', '.package-lock.json'),
        JSON.stringify({ packages: installed }),
      );
    }
  };
  const wanted = {
    '': { name: 'app' },
    'node_modules/a': { version: '1.0.0' },
    'node_modules/b': { version: '2.0.0', optional: true },
  };

  test('are complete where only another system’s are absent', () => {
    write(wanted, { 'node_modules/a': { version: '1.0.0' } });
    expect(packagesAreInstalled(folder)).toBe(true);
  });
  test.each([
    ['the lock file names another version', { 'node_modules/a': { version: '0.9.0' } }],
    ['a package is absent', {}],
    ['the installation was interrupted', null],
  ])('are not where %s', (_when, installed) => {
    write(wanted, installed);
    expect(packagesAreInstalled(folder)).toBe(false);
  });
});

test('the newest PostgreSQL is taken, or the one that wrote the data', () => {
  for (const version of ['9', '15', '16']) {
    mkdirSync(join(folder, version, 'bin'), { recursive: true });
    for (const name of ['initdb', 'pg_ctl', 'postgres'])
      writeFileSync(join(folder, version, 'bin', name), '');
  }
  mkdirSync(join(folder, '17', 'bin'), { recursive: true });
  expect(findPostgresPrograms(null, folder)).toBe(join(folder, '16', 'bin'));
  expect(findPostgresPrograms('15', folder)).toBe(join(folder, '15', 'bin'));
  expect(findPostgresPrograms('14', folder)).toBeNull();
  expect(findPostgresPrograms(null, join(folder, 'absent'))).toBeNull();
});

describe('the port', () => {
  test('that is taken is named, with the variable to set', async () => {
    const server = createServer();
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const address = server.address();
    const port = typeof address === 'object' ? String(address?.port) : '';
    await expect(chosenPort(port, '127.0.0.1', false)).rejects.toThrow(
      new RegExp(`Port ${port} .*taken.*PORT=`),
    );
    await new Promise((resolve) => server.close(resolve));
    expect(await chosenPort(port, '127.0.0.1', false)).toBe(Number(port));
  });
  test.each(['http', '70000', '-1', '1.5'])('“%s” is refused', async (text) => {
    await expect(chosenPort(text, '127.0.0.1', false)).rejects.toThrow('whole number');
  });
});

test('a start after a killed one goes on; its mark is gone at the end', async () => {
  writeFileSync(join(folder, 'supervisor.pid'), '999999999\n');
  expect(beTheOnlyOne(ending, folder)).toBe(true);
  expect(readFileSync(join(folder, 'supervisor.pid'), 'utf8')).toBe(`${process.pid}\n`);
  await ending.run();
  expect(beTheOnlyOne(new Ending(), folder)).toBe(false);
});

describe('a supervised process', () => {
  const runs = () => readFileSync(join(folder, 'runs'), 'utf8').trim().split('\n').map(Number);
  const alive = (pid: number) => {
    try {
      return process.kill(pid, 0);
    } catch {
      return false;
    }
  };
  const program = () => {
    const file = join(folder, 'program.mjs');
    writeFileSync(
      file,
      `import { appendFileSync } from 'node:fs';
       appendFileSync(${JSON.stringify(join(folder, 'runs'))}, process.pid + '\\n');
       setInterval(() => {}, 1000);`,
    );
    writeFileSync(join(folder, 'runs'), '');
    return file;
  };

  test('that is killed comes back within a second, and is gone at the end', async () => {
    supervise(ending, 'test', [program()], { env: {}, log: join(folder, 'log'), tell: () => {} });
    await until(async () => runs()[0] > 0, 'it runs');
    process.kill(runs()[0], 'SIGKILL');
    await until(async () => runs().length === 2, 'it runs again');
    await ending.run();
    expect(runs().filter(alive)).toEqual([]);
  });

  test('waits longer after each death by itself, never long after a kill', () => {
    expect([1, 2, 3, 20].map((deaths) => restartDelayMs(deaths, false))).toEqual([50, 100, 200, 5000]);
    expect(restartDelayMs(20, true)).toBeLessThan(1000);
  });
});

test('a step that fails tells its last lines; one that is under way ends with the command', async () => {
  await expect(runProgram(ending, 'sh', ['-c', 'echo the reason >&2; exit 3'])).rejects.toThrow(
    /ended with 3[^]*the reason/,
  );
  const step = runProgram(ending, 'sleep', ['60']);
  await Promise.all([expect(step).rejects.toThrow('SIGTERM'), ending.run()]);
  expect(() => runProgram(ending, 'true', [])).toThrow('Stopped');
});
