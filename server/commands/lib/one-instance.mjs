import { existsSync, mkdirSync, readFileSync, readlinkSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { freePort, tryPort } from './ports.mjs';
import { commandLine } from './postmaster.mjs';
import { pause } from './processes.mjs';
import { Refusal } from './project.mjs';

/** @import { Ending } from './ending.mjs' */

const AFTER_CRASH_MS = 12_000;

/** @param {number} pid */
function workingFolder(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`);
  } catch {
    return null;
  }
}

/**
 * Refuses a second start in the same folder, which would share one database cluster and stop it under the first.
 * @param {Ending} ending
 * @param {string} stateFolder
 * @returns {boolean} whether the last start was killed, so that its processes may still be leaving.
 */
export function beTheOnlyOne(ending, stateFolder) {
  const file = join(stateFolder, 'supervisor.pid');
  const before = existsSync(file) ? Number(readFileSync(file, 'utf8')) : null;
  if (before !== null && before !== process.pid) {
    const alive = commandLine(before).some((part) => part.endsWith('commands/start.mjs'));
    if (alive && workingFolder(before) === process.cwd()) {
      throw new Refusal(`Perhertz runs from this folder already (process ${before}). Stop that one first.`);
    }
  }
  mkdirSync(stateFolder, { recursive: true });
  writeFileSync(file, `${process.pid}\n`);
  ending.add(() => rmSync(file, { force: true }));
  return before !== null;
}

/**
 * The port to serve on, found free.
 * @param {string | undefined} text the variable PORT; 0 asks for any.
 * @param {string} host
 * @param {boolean} wait give processes of a killed start the time to leave.
 * @returns {Promise<number>}
 */
export async function chosenPort(text, host, wait) {
  const port = Number(text ?? 4173);
  if (!Number.isInteger(port) || port < 0 || port > 65_535) {
    throw new Refusal(`PORT is “${text}”; it must be a whole number from 0 to 65535.`);
  }
  if (port === 0) return freePort();
  const end = Date.now() + (wait ? AFTER_CRASH_MS : 0);
  for (;;) {
    const free = await tryPort(port, host).catch((/** @type {NodeJS.ErrnoException} */ error) => {
      throw new Refusal(
        `Port ${port} on ${host} can’t be used (${error.code}). Set PORT and HOST to others.`,
      );
    });
    if (free !== null) return free;
    if (Date.now() >= end) {
      throw new Refusal(
        `Port ${port} on ${host} is taken by another program. Set PORT to a free one, for example: PORT=${port + 100} npm start`,
      );
    }
    await pause(200);
  }
}
