import { readdirSync, readFileSync, rmSync, existsSync } from 'node:fs';
import { join } from 'node:path';
import { runningPostmaster } from './postmaster.mjs';
import { pause } from './processes.mjs';

const PATIENCE_MS = 4000;

/**
 * Processes that carry a run's mark in their environment: the test runner and all that it started, browsers included.
 * @param {string} run
 * @returns {number[]}
 */
function marked(run) {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
    .filter((name) => {
      try {
        return readFileSync(`/proc/${name}/environ`, 'utf8').split('\0').includes(`PERHERTZ_TEST_RUN=${run}`);
      } catch {
        return false;
      }
    })
    .map(Number);
}

/**
 * @param {number[]} pids
 * @param {NodeJS.Signals} signal
 */
function signalAll(pids, signal) {
  for (const pid of pids) {
    try {
      process.kill(pid, signal);
    } catch {
      // It ended meanwhile.
    }
  }
}

/**
 * Ends whatever a run has left: asks first, insists after some seconds.
 * @param {string} run the run's folder.
 */
export async function killMarked(run) {
  signalAll(marked(run), 'SIGTERM');
  const end = Date.now() + PATIENCE_MS;
  while (marked(run).length > 0 && Date.now() < end) await pause(50);
  signalAll(marked(run), 'SIGKILL');
}

/**
 * Takes away what runs that were killed have left behind in the temporary folder.
 * @param {string} folder
 * @param {string} ours the run that begins now.
 */
export async function sweepOldRuns(folder, ours) {
  for (const name of readdirSync(folder).filter((name) => name.startsWith('perhertz-test-'))) {
    const run = join(folder, name);
    const owner = join(run, 'supervisor.pid');
    if (run === ours || !existsSync(owner)) continue;
    const pid = Number(readFileSync(owner, 'utf8'));
    if (existsSync(`/proc/${pid}`)) continue;
    await killMarked(run);
    const postmaster = runningPostmaster(join(run, 'postgres'));
    if (postmaster) signalAll([postmaster.pid], 'SIGQUIT');
    rmSync(run, { recursive: true, force: true });
  }
}
