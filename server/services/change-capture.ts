import type { DataSource, EntityManager } from 'typeorm';
import type { CaptureChanges } from '../../shared/capture.ts';
import { CaptureEntity, type Capture } from '../entities/capture.ts';
import { TraceEntity } from '../entities/trace.ts';
import type { Actor } from '../policies/verdict.ts';
import { announce } from './announce.ts';
import { recordAudit } from './audit.ts';
import { requireCampaign } from './campaigns.ts';
import { notFound } from './problems.ts';
import { applyChanges, effectiveSettings } from './setting-changes.ts';

/** The capture's row, locked until the transaction ends. */
export async function lockCapture(manager: EntityManager, captureId: string): Promise<Capture> {
  const capture = await manager
    .getRepository(CaptureEntity)
    .findOne({ where: { id: captureId }, lock: { mode: 'pessimistic_write' } });
  if (!capture) throw notFound();
  return capture;
}

/**
 * Renames, moves or resettles a capture. Changed settings hold for the estimates to come; none is made by this.
 * @throws ProblemError 400 where the campaign isn't one of the lab.
 */
export async function changeCapture(
  dataSource: DataSource,
  actor: Actor,
  { id, labId }: Capture,
  changes: CaptureChanges,
): Promise<void> {
  if (changes.campaignId) await requireCampaign(dataSource, labId, changes.campaignId);
  await dataSource.transaction(async (manager) => {
    const capture = await lockCapture(manager, id);
    const settingChanges = applyChanges(capture.settingChanges, changes.settings ?? {}, actor, new Date());
    const first = await manager.getRepository(TraceEntity).findOneBy({ captureId: id, index: 0 });
    const settings = effectiveSettings(capture.fileSettings, first?.settings ?? {}, settingChanges);
    await manager.getRepository(CaptureEntity).update(
      { id },
      {
        name: changes.name ?? capture.name,
        campaignId: changes.campaignId === undefined ? capture.campaignId : changes.campaignId,
        settingChanges,
        rbwHz: settings.rbwHz?.value ?? null,
        updatedAt: new Date(),
      },
    );
    await recordAudit(manager, {
      labId,
      personId: actor.personId,
      action: 'capture.changed',
      objectId: id,
      detail: { ...changes },
    });
    await announce(manager, {
      kind: 'captureChanged',
      labId,
      captureId: id,
      state: capture.state,
      progress: null,
    });
  });
}
