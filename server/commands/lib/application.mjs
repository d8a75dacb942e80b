import { join } from 'node:path';
import { addressOf } from './ports.mjs';
import { lastLines, pause, runProgram, supervise } from './processes.mjs';
import { projectFolder, Refusal } from './project.mjs';

/** @import { Ending } from './ending.mjs' */
/**
 * @typedef {object} Application
 * @property {string} databaseUrl
 * @property {string} sessionSecret
 * @property {string} host
 * @property {number} port
 * @property {boolean} demo
 * @property {boolean} fromSource run the sources under tsx and follow their changes.
 * @property {string | null} logFolder null: logs go to our own output.
 * @property {(sentence: string) => void} tell
 */

const PATIENCE_MS = 90_000;
const FAILURES = 3;

/**
 * @param {Application} application
 * @returns {NodeJS.ProcessEnv}
 */
const environment = ({ databaseUrl, sessionSecret, host, port }) => ({
  DATABASE_URL: databaseUrl,
  SESSION_SECRET: sessionSecret,
  HOST: host,
  PORT: String(port),
});

/**
 * @param {Application} application
 * @param {string} program path below server/, without its ending.
 * @param {boolean} [follow] start again when a source changes.
 * @returns {string[]} what Node is called with.
 */
function nodeArguments({ fromSource }, program, follow = false) {
  if (!fromSource) return ['--enable-source-maps', join(projectFolder, 'dist/node/server', `${program}.js`)];
  const source = join(projectFolder, 'server', `${program}.ts`);
  return follow
    ? [join(projectFolder, 'node_modules/tsx/dist/cli.mjs'), 'watch', source]
    : ['--import', 'tsx', source];
}

/**
 * @param {Ending} ending
 * @param {Application} application
 * @param {string} program
 * @param {string[]} args
 */
async function runOnce(ending, application, program, args) {
  await runProgram(ending, process.execPath, [...nodeArguments(application, program), ...args], {
    env: environment(application),
  });
}

/**
 * @param {Ending} ending
 * @param {string} baseUrl
 * @param {{ failures: number, lastWords: () => string }[]} processes
 */
async function waitForHealth(ending, baseUrl, processes) {
  const end = Date.now() + PATIENCE_MS;
  for (;;) {
    const health = await fetch(`${baseUrl}/api/health`, { signal: AbortSignal.timeout(5000) })
      .then((response) => response.json())
      .catch(() => null);
    if (health?.status === 'ok') return;
    if (ending.begun) throw new Refusal('Stopped.');
    const failing = processes.find(({ failures }) => failures >= FAILURES);
    if (failing)
      throw new Refusal(`A process ends as soon as it starts:\n${lastLines(failing.lastWords(), 12)}`);
    if (Date.now() > end)
      throw new Refusal(`${baseUrl}/api/health doesn’t say ok: ${JSON.stringify(health)}`);
    await pause(100);
  }
}

/**
 * Brings the database up to date, keeps one web and one worker process running, waits until they answer, and puts the
 * demo in place.
 * @param {Ending} ending
 * @param {Application} application
 * @returns {Promise<string>} the address that it serves at.
 */
export async function startApplication(ending, application) {
  const { host, port, demo, fromSource, logFolder, tell } = application;
  await runOnce(ending, application, 'commands/prepare-database', demo ? ['--demo'] : []);
  /** @param {string} name */
  const keep = (name) =>
    supervise(ending, name, nodeArguments(application, name, fromSource), {
      env: environment(application),
      log: logFolder && join(logFolder, `${name}.log`),
      tell,
    });
  const processes = [keep('worker'), keep('web')];
  const reachable = host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host;
  await waitForHealth(ending, addressOf(reachable, port), processes);
  if (demo) await runOnce(ending, application, 'commands/add-samples', [addressOf(reachable, port)]);
  return addressOf(host, port);
}
