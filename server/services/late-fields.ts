import type { UploadItem } from '../../shared/capture.ts';
import type { Actor } from '../policies/verdict.ts';
import { changeCapture } from './change-capture.ts';
import type { Context } from './context.ts';
import { loadCapture } from './load-capture.ts';
import { keepEstimate } from './make-estimate.ts';
import type { UploadFields } from './receive-upload.ts';

/**
 * Puts right what came behind the files of an upload: campaign and settings go onto the captures that it stored. Where
 * the worker was quicker than the settings, a further estimate is made with them.
 */
export async function applyLateFields(
  context: Context,
  actor: Actor,
  items: UploadItem[],
  late: UploadFields,
): Promise<void> {
  if (late.campaignId === undefined && late.settings === undefined) return;
  for (const { id, duplicate } of items) {
    if (id === null || duplicate) continue;
    await changeCapture(context.dataSource, actor, await loadCapture(context.dataSource, id), late);
    const capture = await loadCapture(context.dataSource, id);
    if (late.settings && capture.latestEstimate) {
      await keepEstimate(context, actor, capture, { traceIndex: 0, exclusions: [] });
    }
  }
}
