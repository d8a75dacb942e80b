import type { EntityManager } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';
import type { CaptureState } from '../../shared/capture.ts';
import type { EngineEstimate, EstimateRequest } from '../../shared/estimate.ts';
import { CaptureEntity, type Capture } from '../entities/capture.ts';
import { EstimateEntity } from '../entities/estimate.ts';
import { announce } from './announce.ts';
import { recordAudit } from './audit.ts';

interface NewEstimate {
  body: EngineEstimate;
  request: EstimateRequest;
  change: string;
  /** null: made on arrival. */
  authorId: string | null;
}

/** The state that a capture has with this as its latest estimate. */
export function stateWith(body: EngineEstimate): CaptureState {
  return body.density === null && body.missingSettings.length > 0 ? 'needsSettings' : 'ready';
}

/** Where spurs stand across the span, 0 to 1. */
export function spurPositions({ spurs, input }: EngineEstimate): number[] {
  const spanHz = input.lastHz - input.firstHz;
  return spanHz > 0 ? spurs.map(({ hz }) => (hz - input.firstHz) / spanHz) : [];
}

/**
 * Keeps an estimate under the capture's next number and makes it the latest. The caller's transaction holds the
 * capture's row locked, so that numbers follow each other without a gap.
 * @returns the estimate's id.
 */
export async function writeEstimate(
  manager: EntityManager,
  capture: Capture,
  made: NewEstimate,
): Promise<string> {
  const { body, request, change, authorId } = made;
  const id = uuidv7();
  const last = await manager.getRepository(EstimateEntity).maximum('number', { captureId: capture.id });
  const number = (last ?? 0) + 1;
  const count = (severity: string) => body.findings.filter((finding) => finding.severity === severity).length;
  await manager
    .getRepository(EstimateEntity)
    .createQueryBuilder()
    .insert()
    .values({
      id,
      captureId: capture.id,
      number,
      state: 'working',
      body: () => ':body::jsonb',
      request: () => ':request::jsonb',
      change,
      engineVersion: body.engineVersion,
      authorId,
      verdict: body.averagingCheck.verdict,
      verdictSummary: body.averagingCheck.summary,
      dbmPerHz: body.density?.dbmPerHz ?? null,
      lowDbmPerHz: body.density?.lowDbmPerHz ?? null,
      highDbmPerHz: body.density?.highDbmPerHz ?? null,
      expandedUncertaintyDb: body.density?.expandedUncertaintyDb ?? null,
      spurs: body.spurs.length,
      stops: count('stop'),
      cautions: count('caution'),
    })
    .setParameters({ body: JSON.stringify(body), request: JSON.stringify(request) })
    .execute();
  const state = stateWith(body);
  await manager.getRepository(CaptureEntity).update(
    { id: capture.id },
    {
      latestEstimateId: id,
      state,
      rbwHz: body.settings.rbwHz?.value ?? capture.rbwHz,
      sparkline: capture.sparkline && { ...capture.sparkline, spurs: spurPositions(body) },
      updatedAt: new Date(),
    },
  );
  const { labId, id: captureId } = capture;
  await recordAudit(manager, {
    labId,
    personId: authorId,
    action: 'estimate.made',
    objectId: id,
    detail: { captureId, number, change },
  });
  await announce(manager, { kind: 'estimateMade', labId, captureId, estimateId: id });
  await announce(manager, { kind: 'captureChanged', labId, captureId, state, progress: null });
  return id;
}
