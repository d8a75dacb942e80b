import { createServer } from 'node:http';
import { pino } from 'pino';
import { createApp } from './app.ts';
import { readConfig } from './config.ts';
import { migrate } from './migrate.ts';
import { closeContext, openContext } from './services/open-context.ts';
import { stopInTime } from './services/stop-in-time.ts';

/** A 256 MiB file may take its time; a stalled one is ended much earlier. */
const REQUEST_MS = 15 * 60_000;

const config = readConfig(process.env);
const log = pino({ level: config.logLevel, name: 'web' });

if (config.migrate) await migrate(config.databaseUrl);
const context = await openContext(config, log);
const server = createServer({ requestTimeout: REQUEST_MS, headersTimeout: 20_000 }, createApp(context));
server.listen(config.port, config.host, () => {
  log.info({ address: server.address() }, 'web is listening');
  process.send?.('ready');
  context.threads.warmUp().catch((error: unknown) => log.warn({ err: error }, 'warming up failed'));
});

stopInTime(log, async () => {
  const closed = new Promise((resolve) => server.close(resolve));
  await context.events.stop();
  server.closeIdleConnections();
  const patience = setTimeout(() => server.closeAllConnections(), 6000);
  await closed;
  clearTimeout(patience);
  await closeContext(context);
});
