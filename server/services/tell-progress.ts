import type { DataSource } from 'typeorm';
import { EVENT_CHANNEL } from './event-hub.ts';

const EVERY_MS = 200;

/**
 * Tells screens how far reading is, at most five times a second; a capture that is no longer being read is left alone.
 */
export function progressTeller(dataSource: DataSource, captureId: string) {
  let toldAt = Date.now();
  let telling: Promise<unknown> = Promise.resolve();
  return {
    tell(points: number, ofPoints: number | null): void {
      if (Date.now() - toldAt < EVERY_MS) return;
      toldAt = Date.now();
      telling = telling
        .then(() =>
          dataSource.query(
            `WITH told AS (
               UPDATE capture SET progress_points = $2::int, progress_of_points = $3::int
               WHERE id = $1 AND state = 'reading' RETURNING lab_id, id
             )
             SELECT pg_notify($4, json_build_object('kind', 'captureChanged', 'labId', lab_id, 'captureId', id,
               'state', 'reading', 'progress', json_build_object('points', $2::int, 'ofPoints', $3::int))::text)
             FROM told`,
            [captureId, points, ofPoints, EVENT_CHANNEL],
          ),
        )
        .catch(() => {});
    },
    /** Resolves when nothing is under way. */
    settled: async (): Promise<void> => {
      await telling;
    },
  };
}
