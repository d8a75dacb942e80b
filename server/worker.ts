import { Logger as QueueLogger, run, type Runner } from 'graphile-worker';
import { EventEmitter } from 'node:events';
import { Pool } from 'pg';
import { pino } from 'pino';
import { readConfig } from './config.ts';
import { createDataSource } from './database.ts';
import { taskList } from './jobs/task-list.ts';
import { warmUp } from './jobs/warm-up.ts';
import { rescueCaptures } from './services/rescue-captures.ts';
import { stopInTime } from './services/stop-in-time.ts';
import { WorkerSigns } from './services/worker-signs.ts';

const BEAT_MS = 2000;
const JOBS_AT_ONCE = 2;

const config = readConfig(process.env, false);
const log = pino({ level: config.logLevel, name: 'worker' });
const dataSource = await createDataSource(config.databaseUrl, 6).initialize();
const signs = new WorkerSigns(dataSource);
const warn = (what: string) => (error: unknown) => log.warn({ err: error }, what);

async function startQueue(): Promise<Runner> {
  const pgPool = new Pool({ connectionString: config.databaseUrl, max: JOBS_AT_ONCE + 4 });
  pgPool.on('error', warn('a queue connection was lost'));
  pgPool.on('connect', (client) => client.on('error', warn('a queue connection was lost')));
  const events = new EventEmitter();
  events.on('pool:create', ({ workerPool }) => signs.addLockName(workerPool.id));
  events.on('worker:create', ({ worker }) => signs.addLockName(worker.workerId));
  const runner = await run({
    pgPool,
    events,
    concurrency: JOBS_AT_ONCE,
    pollInterval: 1000,
    noHandleSignals: true,
    gracefulShutdownAbortTimeout: 4000,
    parsedCronItems: [],
    logger: new QueueLogger(
      () => (level, message) => log[level === 'warning' ? 'warn' : level]?.({}, message),
    ),
    taskList: taskList({ dataSource, log, version: config.version }),
  });
  await signs.beat();
  return runner;
}

await signs.beat();
await signs.freePredecessors();
await warmUp();
let runner = await startQueue();
log.info('worker is waiting for jobs');

const heartbeat = setInterval(() => {
  signs
    .beat()
    .then(() => signs.sweep())
    .then((dead) => dead > 0 && log.warn({ dead }, 'freed the jobs of dead workers'))
    .then(() => rescueCaptures(dataSource))
    .catch(warn('the heartbeat failed'));
}, BEAT_MS);

let stopping = false;
stopInTime(log, async () => {
  stopping = true;
  clearInterval(heartbeat);
  await runner.stop();
  await signs.leave();
  await dataSource.destroy();
});

/** The queue ends by itself only on faults, such as a lost database: begin again. */
while (!stopping) {
  await runner.promise.catch(warn('the queue stopped'));
  if (stopping) break;
  await new Promise((resolve) => setTimeout(resolve, 1000));
  runner = await startQueue().catch((error: unknown) => {
    warn('the queue can’t start')(error);
    return runner;
  });
}
