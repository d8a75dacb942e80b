import type { Logger } from 'pino';
import type { Pool } from 'pg';
import type { DataSource } from 'typeorm';
import type { Config } from '../config.ts';
import type { ThreadPool } from '../threads/pool.ts';
import type { EventHub } from './event-hub.ts';

/** What the services of one web process share. */
export interface Context {
  config: Config;
  log: Logger;
  dataSource: DataSource;
  /** Connections of the session store and of the rate limits, apart from the application's own. */
  sessionPool: Pool;
  threads: ThreadPool;
  events: EventHub;
}
