import { existsSync, readFileSync, realpathSync, rmSync } from 'node:fs';
import { basename, join } from 'node:path';

/**
 * @param {number} pid
 * @returns {string[]} the command line of a process; empty where there is none.
 */
export function commandLine(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0');
  } catch {
    return [];
  }
}

/**
 * The PostgreSQL that runs on a data folder. A pid file alone proves nothing: after a crash its number may belong to
 * another program.
 * @param {string} folder
 * @returns {{ pid: number, port: number } | null}
 */
export function runningPostmaster(folder) {
  try {
    const [pid, , , port] = readFileSync(join(folder, 'postmaster.pid'), 'utf8').split('\n').map(Number);
    const [program, ...args] = commandLine(pid);
    const same = args.some((arg) => arg === folder || (arg.startsWith('/') && arg === realpathSync(folder)));
    return program && basename(program) === 'postgres' && same ? { pid, port } : null;
  } catch {
    return null;
  }
}

/**
 * Takes away a pid file that a crash has left, which would keep PostgreSQL from starting.
 * @param {string} folder
 */
export function clearStalePidFile(folder) {
  const file = join(folder, 'postmaster.pid');
  if (existsSync(file) && !runningPostmaster(folder)) rmSync(file, { force: true });
}
