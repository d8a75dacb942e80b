import type { DataSource, EntityManager } from 'typeorm';
import { z } from 'zod';
import { CaptureEntity, type Capture } from '../entities/capture.ts';
import { EstimateEntity, type Estimate } from '../entities/estimate.ts';
import { TraceEntity, type Trace } from '../entities/trace.ts';
import { notFound } from './problems.ts';

type Database = DataSource | EntityManager;

export const isId = (text: string): boolean => z.uuid().safeParse(text).success;

/** @throws ProblemError 404 where there is no such capture. */
export async function loadCapture(database: Database, captureId: string): Promise<Capture> {
  const capture = isId(captureId)
    ? await database.getRepository(CaptureEntity).findOne({
        where: { id: captureId },
        relations: { uploader: true, campaign: true, latestEstimate: { author: true } },
      })
    : null;
  if (!capture) throw notFound();
  return capture;
}

export function loadTraces(database: Database, captureId: string): Promise<Trace[]> {
  return database.getRepository(TraceEntity).find({ where: { captureId }, order: { index: 'ASC' } });
}

/** A capture's kept estimates without their bodies, newest first. */
export function loadEstimates(database: Database, captureId: string): Promise<Estimate[]> {
  return database
    .getRepository(EstimateEntity)
    .find({ where: { captureId }, relations: { author: true }, order: { number: 'DESC' } });
}

/**
 * One kept estimate with its body, and the capture that it belongs to.
 * @throws ProblemError 404 where there is no such estimate.
 */
export async function loadEstimate(
  database: Database,
  estimateId: string,
): Promise<{ estimate: Estimate; capture: Capture }> {
  const estimate = isId(estimateId)
    ? await database
        .getRepository(EstimateEntity)
        .createQueryBuilder('estimate')
        .addSelect(['estimate.body', 'estimate.request'])
        .leftJoinAndSelect('estimate.author', 'author')
        .where('estimate.id = :estimateId', { estimateId })
        .getOne()
    : null;
  if (!estimate) throw notFound();
  return { estimate, capture: await loadCapture(database, estimate.captureId) };
}
