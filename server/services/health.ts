import type { Health } from '../../shared/session.ts';
import { ENGINE_VERSION } from '../engine/version.ts';
import type { Context } from './context.ts';

const PATIENCE_MS = 5000;

/** Whether the database answers and a worker gave a sign of life within the last seconds. */
export async function readHealth({ sessionPool, config }: Context): Promise<Health> {
  const timeout = new Promise<null>((resolve) => setTimeout(() => resolve(null), PATIENCE_MS).unref());
  const asked = sessionPool
    .query<{ alive: boolean }>(
      `SELECT EXISTS (SELECT 1 FROM worker_heartbeat WHERE seen_at > now() - interval '6 seconds') AS alive`,
    )
    .catch(() => null);
  const answer = await Promise.race([asked, timeout]);
  const database = answer !== null;
  const worker = answer?.rows[0]?.alive ?? false;
  return {
    status: database && worker ? 'ok' : 'degraded',
    database,
    worker,
    engineVersion: ENGINE_VERSION,
    version: config.version,
  };
}
