import { createServer } from 'node:http';
import { Pool } from 'pg';
import { pino } from 'pino';
import { createApp } from './app.ts';
import { readConfig } from './config.ts';
import { createDataSource } from './database.ts';
import { migrate } from './migrate.ts';
import { EventHub } from './services/event-hub.ts';
import { stopInTime } from './services/stop-in-time.ts';
import { createThreadPool } from './threads/pool.ts';

/** A 256 MiB file may take its time; a stalled one is ended much earlier. */
const REQUEST_MS = 15 * 60_000;

const config = readConfig(process.env);
const log = pino({ level: config.logLevel, name: 'web' });

if (config.migrate) await migrate(config.databaseUrl);
const dataSource = await createDataSource(config.databaseUrl).initialize();
const sessionPool = new Pool({ connectionString: config.databaseUrl, max: 8, connectionTimeoutMillis: 5000 });
sessionPool.on('error', (error) => log.warn({ err: error }, 'a session connection was lost'));
const events = new EventHub(config.databaseUrl, log);
await events.start();
const threads = createThreadPool(config.databaseUrl);

const app = createApp({ config, log, dataSource, sessionPool, threads, events });
const server = createServer({ requestTimeout: REQUEST_MS, headersTimeout: 20_000 }, app);
server.listen(config.port, config.host, () => {
  log.info({ address: server.address() }, 'web is listening');
  process.send?.('ready');
});

stopInTime(log, async () => {
  const closed = new Promise((resolve) => server.close(resolve));
  await events.stop();
  server.closeIdleConnections();
  const patience = setTimeout(() => server.closeAllConnections(), 7000);
  await closed;
  clearTimeout(patience);
  await threads.close();
  await sessionPool.end();
  await dataSource.destroy();
});
