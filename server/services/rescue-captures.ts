import type { DataSource } from 'typeorm';
import type { ReaderProblem } from '../../shared/capture.ts';
import { markUnreadable } from './mark-unreadable.ts';

const EXHAUSTED: ReaderProblem = {
  code: 'readingStopped',
  severity: 'stop',
  message: 'The worker stopped several times while it read this file.',
  advice:
    'The file is kept as it is; it may be too large for this machine’s memory. Upload a smaller export, or tell your administrator.',
};

/**
 * Nothing stays in reading for ever: captures whose job is used up become unreadable with a sentence, and captures whose
 * job is gone get a new one.
 */
export async function rescueCaptures(dataSource: DataSource): Promise<void> {
  const stuck = await dataSource.query<{ id: string; used: boolean }[]>(
    `SELECT capture.id, job.id IS NOT NULL AS used
     FROM capture LEFT JOIN graphile_worker.jobs AS job ON job.key = capture.id::text
     WHERE capture.state = ANY (ARRAY['received'::text, 'reading'::text])
       AND capture.updated_at < now() - interval '10 seconds'
       AND (job.id IS NULL OR (job.locked_at IS NULL AND job.attempts >= job.max_attempts))`,
  );
  for (const { id, used } of stuck) {
    if (used) await markUnreadable(dataSource, id, [EXHAUSTED]);
    else {
      await dataSource.query(
        `SELECT graphile_worker.add_job('read-capture', json_build_object('captureId', $1::text), job_key := $1::text,
           max_attempts := 5, job_key_mode := 'unsafe_dedupe')`,
        [id],
      );
    }
  }
}
