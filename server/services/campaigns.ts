import type { DataSource } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';
import type { Campaign as CampaignJson, CampaignRequest } from '../../shared/capture.ts';
import { CampaignEntity } from '../entities/campaign.ts';
import type { Actor } from '../policies/verdict.ts';
import { recordAudit } from './audit.ts';
import { conflict, invalid } from './problems.ts';

/** A lab's campaigns by name, each with its number of captures. */
export async function listCampaigns(dataSource: DataSource, labId: string): Promise<CampaignJson[]> {
  return dataSource.query<CampaignJson[]>(
    `SELECT campaign.id, campaign.name, campaign.limit_dbm_per_hz AS "limitDbmPerHz", count(capture.id)::int AS captures
     FROM campaign LEFT JOIN capture ON capture.campaign_id = campaign.id
     WHERE campaign.lab_id = $1 GROUP BY campaign.id ORDER BY lower(campaign.name), campaign.id`,
    [labId],
  );
}

/** @throws ProblemError 409 where the lab has a campaign of that name. */
export async function createCampaign(
  dataSource: DataSource,
  actor: Actor,
  labId: string,
  { name, limitDbmPerHz = null }: CampaignRequest,
): Promise<CampaignJson> {
  return dataSource.transaction(async (manager) => {
    const id = uuidv7();
    const { identifiers } = await manager
      .createQueryBuilder()
      .insert()
      .into(CampaignEntity)
      .values({ id, labId, name, limitDbmPerHz })
      .orIgnore()
      .returning('id')
      .execute();
    if (!identifiers[0])
      throw conflict(`This lab already has a campaign named “${name}”; choose another name.`);
    await recordAudit(manager, {
      labId,
      personId: actor.personId,
      action: 'campaign.created',
      objectId: id,
      detail: { name },
    });
    return { id, name, limitDbmPerHz, captures: 0 };
  });
}

/** @throws ProblemError 400 where the campaign isn't one of the lab. */
export async function requireCampaign(
  dataSource: DataSource,
  labId: string,
  campaignId: string,
): Promise<void> {
  const found = await dataSource.getRepository(CampaignEntity).existsBy({ id: campaignId, labId });
  if (!found) {
    const message = 'isn’t a campaign of this lab';
    throw invalid(`The campaign ${message}; choose another or none.`, [{ path: 'campaignId', message }]);
  }
}
