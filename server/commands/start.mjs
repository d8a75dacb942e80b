#!/usr/bin/env node
// Starts everything on this machine: packages, database, client, web and worker. Plain Node: it runs before anything is installed.
import { join } from 'node:path';
import { startApplication } from './lib/application.mjs';
import { buildApplication } from './lib/build.mjs';
import { startCluster } from './lib/cluster.mjs';
import { runCommand } from './lib/ending.mjs';
import { installNodePackages } from './lib/node-packages.mjs';
import { addressOf, freePort, tryPort } from './lib/ports.mjs';
import { pause, supervise } from './lib/processes.mjs';
import { dataFolder, keepSecret, projectFolder, requireNode, tell } from './lib/project.mjs';
import { beTheOnlyOne, chosenPort } from './lib/one-instance.mjs';

/** @import { Ending } from './lib/ending.mjs' */

const dev = process.argv.includes('--dev');
const production = process.env.NODE_ENV === 'production';
const host = process.env.HOST ?? '127.0.0.1';

/** @param {Ending} ending */
async function start(ending) {
  requireNode();
  const afterCrash = beTheOnlyOne(ending, dataFolder);
  const port = await chosenPort(process.env.PORT, host, afterCrash);
  const [databaseUrl] = await Promise.all([
    process.env.DATABASE_URL ?? startCluster(ending, dataFolder).then(({ url }) => url),
    installNodePackages(ending).then(() => (dev ? undefined : buildApplication(ending))),
  ]);
  tell('Starting web and worker …');
  const logFolder = production ? null : join(dataFolder, 'log');
  const webPort = dev ? await freePort() : port;
  const address = await startApplication(ending, {
    databaseUrl,
    sessionSecret: process.env.SESSION_SECRET ?? keepSecret(join(dataFolder, 'session-secret')),
    host: dev ? '127.0.0.1' : host,
    port: webPort,
    demo: process.env.PERHERTZ_DEMO !== '0' && !production,
    fromSource: dev,
    logFolder: dev ? null : logFolder,
    tell,
  });
  if (dev) {
    const vite = join(projectFolder, 'node_modules/vite/bin/vite.js');
    supervise(ending, 'client', [vite, '--port', String(port), '--host', host, '--strictPort'], {
      env: { PERHERTZ_API_URL: address },
      log: null,
      tell,
    });
    while (!ending.begun && !(await tryPort(port, host).then((free) => free === null))) await pause(100);
  } else if (logFolder) tell(`Logs are in ${logFolder}. Ctrl-C stops everything.`);
  tell(`Perhertz is ready at ${addressOf(host, port)}`);
}

await runCommand(start, 0);
