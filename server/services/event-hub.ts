import { EventEmitter } from 'node:events';
import { Client } from 'pg';
import type { Logger } from 'pino';
import { LabEvent } from '../../shared/events.ts';

/** PostgreSQL channel of the events that go to screens. */
export const EVENT_CHANNEL = 'perhertz_event';

/**
 * One listening connection per web process; hands each event to those who listen for its lab. When the connection is
 * lost, events may be missed: `lost` tells the open streams to end, so that browsers connect again and ask anew.
 */
export class EventHub extends EventEmitter<{ event: [LabEvent]; lost: [] }> {
  readonly #databaseUrl: string;
  readonly #log: Logger;
  #client: Client | null = null;
  #retry: NodeJS.Timeout | null = null;
  #stopped = false;

  constructor(databaseUrl: string, log: Logger) {
    super();
    this.#databaseUrl = databaseUrl;
    this.#log = log;
    this.setMaxListeners(0);
  }

  get listening(): boolean {
    return this.#client !== null;
  }

  async start(): Promise<void> {
    const client = new Client({
      connectionString: this.#databaseUrl,
      keepAlive: true,
      application_name: 'perhertz-events',
    });
    client.on('error', (error) => this.#lose(client, error));
    client.on('end', () => this.#lose(client, null));
    client.on('notification', ({ payload }) => this.#receive(payload ?? ''));
    try {
      await client.connect();
      await client.query(`LISTEN ${EVENT_CHANNEL}`);
      this.#client = client;
    } catch (error) {
      this.#lose(client, error);
    }
  }

  async stop(): Promise<void> {
    this.#stopped = true;
    if (this.#retry) clearTimeout(this.#retry);
    this.emit('lost');
    const client = this.#client;
    this.#client = null;
    await client?.end();
  }

  #receive(payload: string): void {
    try {
      this.emit('event', LabEvent.parse(JSON.parse(payload)));
    } catch (error) {
      this.#log.warn({ error, payload }, 'an event could not be read');
    }
  }

  #lose(client: Client, error: unknown): void {
    if (this.#stopped) return;
    if (this.#client === client) {
      this.#client = null;
      this.emit('lost');
    }
    client.removeAllListeners('end');
    client.end().catch(() => {});
    if (this.#retry) return;
    if (error) this.#log.warn({ error }, 'the event connection is lost; trying again');
    this.#retry = setTimeout(() => {
      this.#retry = null;
      void this.start();
    }, 500);
  }
}
