import type { EngineEstimate, EstimateRequest } from '../../shared/estimate.ts';
import type { Settings } from '../../shared/settings.ts';
import type { Capture } from '../entities/capture.ts';
import { EstimateEntity, type Estimate } from '../entities/estimate.ts';
import { TraceEntity } from '../entities/trace.ts';
import type { Actor } from '../policies/verdict.ts';
import { lockCapture } from './change-capture.ts';
import type { Context } from './context.ts';
import { changeSentence } from './estimate-change.ts';
import { conflict, invalid } from './problems.ts';
import { applyChanges, effectiveSettings, type SettingChangeValues } from './setting-changes.ts';
import { writeEstimate } from './write-estimate.ts';

/** A checked request: its settings are typed values. */
export type CheckedRequest = Omit<EstimateRequest, 'settings'> & { settings?: SettingChangeValues };

async function settingsFor(
  context: Context,
  actor: Actor,
  capture: Capture,
  request: CheckedRequest,
): Promise<Settings> {
  if (capture.state === 'received' || capture.state === 'reading') {
    throw conflict('This capture is still being read; ask again when it’s ready.');
  }
  if (capture.state === 'unreadable') {
    throw conflict('This capture can’t be read, so there is nothing to estimate; upload a file that can.');
  }
  const trace = await context.dataSource
    .getRepository(TraceEntity)
    .findOneBy({ captureId: capture.id, index: request.traceIndex });
  if (!trace) {
    const message = 'isn’t a trace of this capture; traces are numbered from 0';
    throw invalid(`traceIndex ${request.traceIndex} ${message}.`, [{ path: 'traceIndex', message }]);
  }
  const overrides = applyChanges(capture.settingChanges, request.settings ?? {}, actor, new Date());
  return effectiveSettings(capture.fileSettings, trace.settings, overrides);
}

/**
 * Computes an estimate of a capture on a worker thread, without keeping it.
 * @param request its settings are changes on top of the capture's own.
 * @throws ProblemError 409 where the capture isn't read, 400 where it has no such trace.
 */
export async function computeEstimate(
  context: Context,
  actor: Actor,
  capture: Capture,
  request: CheckedRequest,
): Promise<EngineEstimate> {
  const settings = await settingsFor(context, actor, capture, request);
  return context.threads.estimate({
    captureId: capture.id,
    traceIndex: request.traceIndex,
    sha256: capture.sha256,
    settings,
    exclusions: request.exclusions,
    options: request.options ?? {},
  });
}

async function latestComputation(context: Context, captureId: string): Promise<Estimate | null> {
  return context.dataSource
    .getRepository(EstimateEntity)
    .createQueryBuilder('estimate')
    .addSelect(['estimate.body', 'estimate.request'])
    .where('estimate.capture_id = :captureId', { captureId })
    .orderBy('estimate.number', 'DESC')
    .limit(1)
    .getOne();
}

/** What changed against the latest kept estimate, in words; null where there is none. */
export async function changeAgainstLatest(
  context: Context,
  captureId: string,
  body: EngineEstimate,
  request: CheckedRequest,
): Promise<string | null> {
  const latest = await latestComputation(context, captureId);
  return (
    latest &&
    changeSentence(
      { settings: latest.body.settings, request: latest.request },
      { settings: body.settings, request },
    )
  );
}

/**
 * Computes an estimate and keeps it under the capture's next number.
 * @returns the kept estimate's id.
 */
export async function keepEstimate(
  context: Context,
  actor: Actor,
  capture: Capture,
  request: CheckedRequest,
): Promise<string> {
  const body = await computeEstimate(context, actor, capture, request);
  const change = (await changeAgainstLatest(context, capture.id, body, request)) ?? 'First estimate';
  return context.dataSource.transaction(async (manager) => {
    const locked = await lockCapture(manager, capture.id);
    return writeEstimate(manager, locked, { body, request, change, authorId: actor.personId });
  });
}
