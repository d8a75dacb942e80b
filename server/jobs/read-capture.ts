import type { DataSource } from 'typeorm';
import type { Logger } from 'pino';
import type { ReaderProblem } from '../../shared/capture.ts';
import { readTraceFile, UnreadableFile, type ReadResult } from '../reader/read-trace-file.ts';
import { announce } from '../services/announce.ts';
import { captureBytes } from '../services/stored-bytes.ts';
import { markUnreadable } from '../services/mark-unreadable.ts';
import { progressTeller } from '../services/tell-progress.ts';
import { writeReading } from '../services/write-reading.ts';

export interface ReadingRun {
  dataSource: DataSource;
  log: Logger;
  /** Version of the application that reads. */
  version: string;
  signal?: AbortSignal;
  /** No further try follows this one. */
  lastTry: boolean;
}

const GIVEN_UP: ReaderProblem = {
  code: 'readingFailed',
  severity: 'stop',
  message: 'Reading this file failed for a reason that isn’t the file’s fault.',
  advice:
    'The file is kept as it is; tell your administrator, who finds the reason in the worker’s log under this capture.',
};

async function startReading(
  dataSource: DataSource,
  captureId: string,
): Promise<{ labId: string; fileName: string } | null> {
  const [[started]] = await dataSource.query<[{ labId: string; fileName: string }[], number]>(
    `UPDATE capture SET state = 'reading', progress_points = 0, progress_of_points = NULL, updated_at = now()
     WHERE id = $1 AND state IN ('received', 'reading') RETURNING lab_id AS "labId", file_name AS "fileName"`,
    [captureId],
  );
  return started ?? null;
}

/**
 * Reads a stored file, stores its traces and makes the first estimate. May run any number of times, also after a kill
 * in the middle: the end is written in one transaction that only the first to finish gets through.
 */
export async function readCapture(captureId: string, run: ReadingRun): Promise<void> {
  const { dataSource, log, signal } = run;
  const started = await startReading(dataSource, captureId);
  if (!started) return;
  const { labId, fileName } = started;
  const progress = { points: 0, ofPoints: null };
  await announce(dataSource, { kind: 'captureChanged', labId, captureId, state: 'reading', progress });
  const teller = progressTeller(dataSource, captureId);
  try {
    const reading: ReadResult = await readTraceFile(captureBytes(dataSource, captureId), {
      fileName,
      onProgress: teller.tell,
      signal,
    });
    await teller.settled();
    await writeReading(dataSource, captureId, reading, run.version);
  } catch (error) {
    await teller.settled();
    if (error instanceof UnreadableFile) {
      await markUnreadable(dataSource, captureId, error.problems);
      return;
    }
    log.error({ err: error, captureId }, 'reading a capture failed');
    if (!run.lastTry || signal?.aborted) throw error;
    await markUnreadable(dataSource, captureId, [GIVEN_UP]);
  }
}
