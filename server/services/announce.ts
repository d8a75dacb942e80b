import type { LabEvent } from '../../shared/events.ts';
import { EVENT_CHANNEL } from './event-hub.ts';

interface Database {
  query(sql: string, parameters: unknown[]): Promise<unknown>;
}

/** Tells the screens; inside a transaction the event leaves at commit. */
export async function announce(database: Database, event: LabEvent): Promise<void> {
  await database.query('SELECT pg_notify($1, $2)', [EVENT_CHANNEL, JSON.stringify(event)]);
}
