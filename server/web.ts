import { createServer } from 'node:http';
import { Pool } from 'pg';
import { pino } from 'pino';
import { createApp } from './app.ts';
import { readConfig } from './config.ts';
import { createDataSource } from './database.ts';
import { migrate } from './migrate.ts';
import { EventHub } from './services/event-hub.ts';

const config = readConfig(process.env);
const log = pino({ level: config.logLevel, name: 'web' });

if (config.migrate) await migrate(config.databaseUrl);
const dataSource = await createDataSource(config.databaseUrl).initialize();
const sessionPool = new Pool({ connectionString: config.databaseUrl, max: 8, connectionTimeoutMillis: 5000 });
sessionPool.on('error', (error) => log.warn({ error }, 'a session connection was lost'));
const events = new EventHub(config.databaseUrl, log);
await events.start();

const server = createServer(createApp({ config, log, dataSource, sessionPool, threads: {}, events }));
server.listen(config.port, config.host, () => {
  log.info({ address: server.address() }, 'web is listening');
});
