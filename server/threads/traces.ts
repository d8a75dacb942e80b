import { Pool } from 'pg';
import type { LevelUnit } from '../../shared/capture.ts';
import { toDoubles } from '../services/trace-bytes.ts';
import type { TraceKey } from './pool.ts';

export interface LoadedTrace {
  frequencyHz: Float64Array;
  level: Float64Array;
  unit: LevelUnit;
}

/** About 64 MB of doubles. */
const MOST_POINTS = 4_000_000;

/** The traces that this thread used last, loaded from the database when they aren't here. */
export class TraceCache {
  readonly #pool: Pool;
  readonly #traces = new Map<string, LoadedTrace>();

  constructor(databaseUrl: string) {
    this.#pool = new Pool({ connectionString: databaseUrl, max: 1, connectionTimeoutMillis: 5000 });
    this.#pool.on('error', () => {});
  }

  /** @throws Error where there is no such trace. */
  async get({ captureId, traceIndex }: TraceKey): Promise<LoadedTrace> {
    const key = `${captureId}/${traceIndex}`;
    const trace = this.#traces.get(key) ?? (await this.#load(captureId, traceIndex));
    this.#traces.delete(key);
    this.#traces.set(key, trace);
    let points = 0;
    for (const kept of this.#traces.values()) points += kept.level.length;
    for (const [oldest, { level }] of this.#traces) {
      if (points <= MOST_POINTS || oldest === key) break;
      this.#traces.delete(oldest);
      points -= level.length;
    }
    return trace;
  }

  async #load(captureId: string, traceIndex: number): Promise<LoadedTrace> {
    const { rows } = await this.#pool.query<{ frequencies: Buffer; levels: Buffer; unit: LevelUnit }>(
      'SELECT frequencies, levels, unit FROM trace WHERE capture_id = $1 AND index = $2',
      [captureId, traceIndex],
    );
    if (!rows[0]) throw new Error(`Capture ${captureId} has no trace ${traceIndex}.`);
    const { frequencies, levels, unit } = rows[0];
    return { frequencyHz: toDoubles(frequencies), level: toDoubles(levels), unit };
  }
}
