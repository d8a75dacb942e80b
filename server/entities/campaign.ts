import { EntitySchema } from 'typeorm';
import { LabEntity } from './lab.ts';

/** A set of captures for one purpose. */
export interface Campaign {
  id: string;
  labId: string;
  name: string;
  limitDbmPerHz: number | null;
  createdAt: Date;
}

export const CampaignEntity = new EntitySchema<Campaign>({
  name: 'campaign',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'campaign_pk' },
    labId: { type: 'uuid', foreignKey: { target: LabEntity, name: 'campaign_lab_fk', onDelete: 'CASCADE' } },
    name: { type: 'text' },
    limitDbmPerHz: { type: 'float8', nullable: true },
    createdAt: { type: 'timestamptz', default: () => 'now()' },
  },
  uniques: [{ name: 'campaign_name_key', columns: ['labId', 'name'] }],
});
