import { spawn } from 'node:child_process';
import { createWriteStream, existsSync, mkdirSync, readFileSync, renameSync, statSync } from 'node:fs';
import { dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import { projectFolder, Refusal } from './project.mjs';

/** @import { Ending } from './ending.mjs' */
/** @typedef {{ uid: number, gid: number }} SystemUser */

const PATIENCE_MS = 12_000;
const LAST_LINES = 25;
const LOG_BYTES = 10 * 1024 * 1024;
const leaveWithParent = fileURLToPath(new URL('./leave-with-parent.mjs', import.meta.url));

/**
 * @param {number} ms
 * @returns {Promise<void>}
 */
export const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/**
 * Waits for an end, but no longer than this.
 * @param {Promise<unknown>} ended
 * @param {number} ms
 */
async function waitAtMost(ended, ms) {
  /** @type {NodeJS.Timeout | undefined} */
  let timer;
  await Promise.race([ended, new Promise((resolve) => (timer = setTimeout(resolve, ms)))]);
  clearTimeout(timer);
}

/**
 * @param {string} text
 * @param {number} [count]
 */
export const lastLines = (text, count = LAST_LINES) => text.trimEnd().split('\n').slice(-count).join('\n');

/**
 * @param {number} pid
 * @param {NodeJS.Signals} signal
 */
function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal);
  } catch {
    // The group is gone already.
  }
}

/**
 * Runs a program to its end, in a process group of its own, so that a Ctrl-C reaches it in the order that we choose.
 * @param {Ending} ending
 * @param {string} program
 * @param {string[]} args
 * @param {object} [options]
 * @param {string} [options.cwd]
 * @param {NodeJS.ProcessEnv} [options.env]
 * @param {SystemUser | null} [options.user] whom it runs as, where that isn't us.
 * @param {string} [options.input]
 * @param {boolean} [options.patient] let it finish when the command is told to stop.
 * @returns {Promise<string>} its output.
 * @throws {Refusal} with its last lines where it fails.
 */
export function runProgram(ending, program, args, { cwd, env, user, input, patient } = {}) {
  if (ending.begun) throw new Refusal('Stopped.');
  return new Promise((resolve, reject) => {
    const child = spawn(program, args, {
      cwd: cwd ?? projectFolder,
      env: { ...process.env, ...env },
      detached: true,
      stdio: ['pipe', 'pipe', 'pipe'],
      ...user,
    });
    let output = '';
    child.stdout.on('data', (bytes) => (output += bytes));
    child.stderr.on('data', (bytes) => (output += bytes));
    child.stdin.on('error', () => {});
    child.stdin.end(input ?? '');
    const ended = new Promise((resolve) => child.once('exit', resolve));
    const forget = ending.add(async () => {
      if (child.pid && !patient) signalGroup(child.pid, 'SIGTERM');
      await waitAtMost(ended, patient ? 120_000 : PATIENCE_MS);
      if (child.pid) signalGroup(child.pid, 'SIGKILL');
    });
    child.once('error', (error) => {
      forget();
      reject(new Refusal(`${program} can’t be run: ${error.message}`));
    });
    child.once('exit', (code, signal) => {
      forget();
      // A program that leaves a daemon behind (pg_ctl) may leave it our pipes: don't wait for their end.
      setTimeout(() => {
        child.stdout.destroy();
        child.stderr.destroy();
        if (code === 0) resolve(output);
        else
          reject(
            new Refusal(
              `${[program, ...args].join(' ')} ended with ${signal ?? code}.\n${lastLines(output)}`,
            ),
          );
      }, 20);
    });
  });
}

/**
 * @param {string} file
 * @returns a stream that appends; a log that has grown too long becomes `….1` first.
 */
function openLog(file) {
  mkdirSync(dirname(file), { recursive: true });
  if (existsSync(file) && statSync(file).size > LOG_BYTES) renameSync(file, `${file}.1`);
  return createWriteStream(file, { flags: 'a', mode: 0o600 });
}

/**
 * How long to wait before a process that died is started again. A kill from outside says nothing about the process,
 * so that it is back within a second however often that happens.
 * @param {number} deathsInARow
 * @param {boolean} killed
 */
export function restartDelayMs(deathsInARow, killed) {
  return Math.min(50 * 2 ** (deathsInARow - 1), killed ? 400 : 5000);
}

/**
 * Keeps a Node program running until the command ends; one that dies is started again, with growing pauses.
 * @param {Ending} ending
 * @param {string} name
 * @param {string[]} args what Node is called with.
 * @param {object} options
 * @param {NodeJS.ProcessEnv} options.env
 * @param {string | null} options.log file that takes its output; null: our own output.
 * @param {(sentence: string) => void} options.tell
 */
export function supervise(ending, name, args, { env, log, tell }) {
  const output = log === null ? null : openLog(log);
  /** @type {import('node:child_process').ChildProcess | null} */
  let child = null;
  /** @type {Promise<unknown>} */
  let ended = Promise.resolve();
  let deaths = 0;
  let deathsByItself = 0;

  const start = () => {
    if (ending.begun) return;
    const begun = Date.now();
    const current = spawn(process.execPath, ['--import', leaveWithParent, ...args], {
      cwd: projectFolder,
      env: { ...process.env, ...env },
      detached: true,
      stdio: output ? ['ignore', 'pipe', 'pipe', 'ipc'] : ['ignore', 'inherit', 'inherit', 'ipc'],
    });
    child = current;
    if (output) {
      current.stdout?.pipe(output, { end: false });
      current.stderr?.pipe(output, { end: false });
    }
    ended = new Promise((resolve) => {
      current.once('error', (error) => {
        tell(`The ${name} process can’t be started: ${error.message}`);
        resolve(null);
      });
      current.once('exit', (code, signal) => {
        resolve(null);
        if (ending.begun) return;
        if (Date.now() - begun > 10_000) deaths = 0;
        deaths += 1;
        if (signal === null) deathsByItself += 1;
        const delay = restartDelayMs(deaths, signal === 'SIGKILL');
        tell(`The ${name} process ended unexpectedly (${signal ?? `code ${code}`}); starting it again.`);
        setTimeout(start, delay);
      });
    });
  };
  start();
  ending.add(async () => {
    const pid = child?.pid;
    if (!pid) return;
    signalGroup(pid, 'SIGTERM');
    await waitAtMost(ended, PATIENCE_MS);
    signalGroup(pid, 'SIGKILL');
    output?.end();
  });
  return {
    /** How often it ended without being killed. */
    get failures() {
      return deathsByItself;
    },
    /** The end of its log, for an error message. */
    lastWords: () => (log && existsSync(log) ? lastLines(readFileSync(log, 'utf8')) : ''),
  };
}
