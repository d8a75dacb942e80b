#!/usr/bin/env node
// Runs the tests on a throw-away database cluster: `npm test`, or `npm test -- tests/api` for some of them.
import { spawn } from 'node:child_process';
import { chmodSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { provideChromium } from './lib/chromium.mjs';
import { startCluster } from './lib/cluster.mjs';
import { runCommand } from './lib/ending.mjs';
import { installNodePackages } from './lib/node-packages.mjs';
import { projectFolder, requireNode, tell } from './lib/project.mjs';
import { killMarked, sweepOldRuns } from './lib/test-runs.mjs';

/** @import { Ending } from './lib/ending.mjs' */

const args = process.argv.slice(2);
const paths = args.filter((arg) => !arg.startsWith('-'));

/** @param {Ending} ending */
async function test(ending) {
  requireNode();
  const browser = paths.length === 0 || paths.some((path) => /browser|tests\/?$/.test(path));
  const run = mkdtempSync(join(tmpdir(), 'perhertz-test-'));
  ending.add(() => rmSync(run, { recursive: true, force: true }));
  chmodSync(run, 0o711);
  writeFileSync(join(run, 'supervisor.pid'), `${process.pid}\n`);
  await sweepOldRuns(tmpdir(), run);
  /** @param {string} chromium */
  const environment = async (chromium) => {
    tell('Starting a throw-away database …');
    const { url } = await startCluster(ending, run, { throwAway: true });
    return { NODE_ENV: 'test', DATABASE_URL: url, PERHERTZ_CHROMIUM: chromium, PERHERTZ_TEST_RUN: run };
  };
  const [env] = await Promise.all([
    (browser ? provideChromium(ending) : Promise.resolve('')).then(environment),
    installNodePackages(ending),
  ]);
  const vitest = spawn(
    process.execPath,
    [join(projectFolder, 'node_modules/vitest/vitest.mjs'), 'run', ...args],
    {
      cwd: projectFolder,
      env: { ...process.env, ...env },
      detached: true,
      stdio: ['ignore', 'inherit', 'inherit'],
    },
  );
  ending.add(() => killMarked(run));
  return new Promise((resolve, reject) => {
    vitest.once('error', reject);
    vitest.once('exit', (code) => resolve(code ?? 1));
  });
}

await runCommand(test, 130);
