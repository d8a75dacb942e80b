import type { DataSource } from 'typeorm';
import type { ReaderProblem } from '../../shared/capture.ts';
import { CaptureEntity } from '../entities/capture.ts';
import { announce } from './announce.ts';
import { lockCapture } from './change-capture.ts';

/** Ends the reading of a capture that can't be read, with the sentences that say why. */
export async function markUnreadable(
  dataSource: DataSource,
  captureId: string,
  problems: ReaderProblem[],
): Promise<void> {
  await dataSource.transaction(async (manager) => {
    const { state, labId } = await lockCapture(manager, captureId);
    if (state !== 'reading' && state !== 'received') return;
    await manager
      .getRepository(CaptureEntity)
      .update(
        { id: captureId },
        { state: 'unreadable', problems, progressPoints: null, updatedAt: new Date() },
      );
    await announce(manager, {
      kind: 'captureChanged',
      labId,
      captureId,
      state: 'unreadable',
      progress: null,
    });
  });
}
