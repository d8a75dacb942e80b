import type { DataSource } from 'typeorm';
import { toDoubles } from './trace-bytes.ts';

interface Database {
  query<T>(sql: string, parameters: unknown[]): Promise<T>;
}

/** A capture's very bytes, one stored piece in memory at a time. */
export async function* captureBytes(database: Database, captureId: string): AsyncGenerator<Buffer> {
  for (let index = 0; ; index += 1) {
    const [chunk] = await database.query<{ bytes: Buffer }[]>(
      'SELECT bytes FROM capture_chunk WHERE capture_id = $1 AND index = $2',
      [captureId, index],
    );
    if (!chunk) return;
    yield chunk.bytes;
  }
}

const SLICE_POINTS = 16_384;

export interface PointSlice {
  frequencyHz: Float64Array;
  level: Float64Array;
}

/** A stored trace from its first point to its last, a slice in memory at a time. */
export async function* tracePoints(
  dataSource: DataSource,
  captureId: string,
  traceIndex: number,
): AsyncGenerator<PointSlice> {
  for (let first = 0; ; first += SLICE_POINTS) {
    const [slice] = await dataSource.query<{ frequencies: Buffer; levels: Buffer }[]>(
      `SELECT substring(frequencies FROM $3 FOR $4) AS frequencies, substring(levels FROM $3 FOR $4) AS levels
       FROM trace WHERE capture_id = $1 AND index = $2`,
      [captureId, traceIndex, first * 8 + 1, SLICE_POINTS * 8],
    );
    if (!slice || slice.levels.length === 0) return;
    yield { frequencyHz: toDoubles(slice.frequencies), level: toDoubles(slice.levels) };
  }
}
