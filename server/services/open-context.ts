import { Pool } from 'pg';
import type { Logger } from 'pino';
import type { Config } from '../config.ts';
import { createDataSource } from '../database.ts';
import { createThreadPool } from '../threads/pool.ts';
import type { Context } from './context.ts';
import { EventHub } from './event-hub.ts';

/** Opens what a web process works with: database, session connections, event connection, worker threads. */
export async function openContext(config: Config, log: Logger): Promise<Context> {
  const dataSource = await createDataSource(config.databaseUrl).initialize();
  const sessionPool = new Pool({
    connectionString: config.databaseUrl,
    max: 8,
    connectionTimeoutMillis: 5000,
    application_name: 'perhertz-sessions',
  });
  sessionPool.on('error', (error) => log.warn({ err: error }, 'a session connection was lost'));
  const events = new EventHub(config.databaseUrl, log);
  await events.start();
  return { config, log, dataSource, sessionPool, events, threads: createThreadPool(config.databaseUrl) };
}

/** Closes all of it; requests must have ended. */
export async function closeContext({ dataSource, sessionPool, events, threads }: Context): Promise<void> {
  await events.stop();
  await threads.close();
  await sessionPool.end();
  await dataSource.destroy();
}
