import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { readCapture, type ReadingRun } from './read-capture.ts';

const Payload = z.object({ captureId: z.uuid() });

/** The queue's tasks by name. */
export function taskList(run: Pick<ReadingRun, 'dataSource' | 'log' | 'version'>): TaskList {
  return {
    'read-capture': (payload, { job, abortSignal }) =>
      readCapture(Payload.parse(payload).captureId, {
        ...run,
        signal: abortSignal,
        lastTry: job.attempts >= job.max_attempts,
      }),
  };
}
