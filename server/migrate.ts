import { runMigrations } from 'graphile-worker';
import { createDataSource } from './database.ts';

/** Any constant will do, as long as every process uses the same. */
const MIGRATION_LOCK = 7_317_402;

/**
 * Brings the database's schema and the job queue's schema up to date. Processes that start together wait for each other
 * under an advisory lock.
 */
export async function migrate(databaseUrl: string): Promise<void> {
  const dataSource = createDataSource(databaseUrl, 3);
  await dataSource.initialize();
  try {
    const lock = dataSource.createQueryRunner();
    await lock.query('SELECT pg_advisory_lock($1)', [MIGRATION_LOCK]);
    try {
      await dataSource.runMigrations();
      await runMigrations({ connectionString: databaseUrl });
    } finally {
      await lock.query('SELECT pg_advisory_unlock($1)', [MIGRATION_LOCK]);
      await lock.release();
    }
  } finally {
    await dataSource.destroy();
  }
}
