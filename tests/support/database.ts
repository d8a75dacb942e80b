import { randomBytes } from 'node:crypto';
import { Client } from 'pg';
import { migrate } from '../../server/migrate.ts';

/** The cluster that `npm test` started. */
function clusterUrl(): URL {
  const url = process.env.DATABASE_URL;
  if (!url)
    throw new Error('Set DATABASE_URL to a throw-away PostgreSQL cluster, or run the tests by npm test.');
  return new URL(url);
}

async function inCluster(sql: string): Promise<void> {
  const client = new Client({ connectionString: clusterUrl().href });
  await client.connect();
  await client.query(sql);
  await client.end();
}

/** A migrated, seeded database of its own. */
export async function createTestDatabase(): Promise<{ url: string; drop: () => Promise<void> }> {
  const name = `perhertz_test_${randomBytes(6).toString('hex')}`;
  await inCluster(`CREATE DATABASE ${name}`);
  const url = clusterUrl();
  url.pathname = `/${name}`;
  await migrate(url.href);
  return { url: url.href, drop: () => inCluster(`DROP DATABASE ${name} WITH (FORCE)`) };
}
