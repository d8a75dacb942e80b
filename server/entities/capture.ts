import { EntitySchema } from 'typeorm';
import type { CaptureState, ReaderProblem, Sparkline, Understanding } from '../../shared/capture.ts';
import type { Settings, Origin } from '../../shared/settings.ts';
import { CampaignEntity, type Campaign } from './campaign.ts';
import { EstimateEntity, type Estimate } from './estimate.ts';
import { LabEntity } from './lab.ts';
import { PersonEntity, type Person } from './person.ts';

/** What people set on top of the file, by name of the setting. */
export type SettingOverrides = Record<string, { value: number | string | boolean; origin: Origin }>;

/** One uploaded file: its bytes never change and are known by their SHA-256. */
export interface Capture {
  id: string;
  labId: string;
  number: string;
  name: string;
  fileName: string;
  mediaType: string;
  bytes: number;
  sha256: string;
  state: CaptureState;
  progressPoints: number | null;
  progressOfPoints: number | null;
  uploaderId: string;
  campaignId: string | null;
  fileSettings: Settings;
  settingChanges: SettingOverrides;
  problems: ReaderProblem[];
  understanding: Understanding | null;
  sparkline: Sparkline | null;
  /** Version of the application that read the file. */
  readerVersion: string | null;
  points: number | null;
  centreHz: number | null;
  spanHz: number | null;
  rbwHz: number | null;
  latestEstimateId: string | null;
  createdAt: Date;
  updatedAt: Date;
  uploader?: Person;
  campaign?: Campaign | null;
  latestEstimate?: Estimate | null;
}

/** Driver values of int8 arrive as text; a file's size fits a double. */
const bigint = { to: (value: number) => value, from: (value: string) => Number(value) };

export const CaptureEntity = new EntitySchema<Capture>({
  name: 'capture',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'capture_pk' },
    labId: { type: 'uuid', foreignKey: { target: LabEntity, name: 'capture_lab_fk', onDelete: 'RESTRICT' } },
    number: { type: 'text' },
    name: { type: 'text' },
    fileName: { type: 'text' },
    mediaType: { type: 'text' },
    bytes: { type: 'int8', transformer: bigint },
    sha256: { type: 'text' },
    state: { type: 'text', default: 'received' },
    progressPoints: { type: 'int', nullable: true },
    progressOfPoints: { type: 'int', nullable: true },
    uploaderId: { type: 'uuid' },
    campaignId: { type: 'uuid', nullable: true },
    fileSettings: { type: 'jsonb', default: {} },
    settingChanges: { type: 'jsonb', default: {} },
    problems: { type: 'jsonb', default: [] },
    understanding: { type: 'jsonb', nullable: true },
    sparkline: { type: 'jsonb', nullable: true },
    readerVersion: { type: 'text', nullable: true },
    points: { type: 'int', nullable: true },
    centreHz: { type: 'float8', nullable: true },
    spanHz: { type: 'float8', nullable: true },
    rbwHz: { type: 'float8', nullable: true },
    latestEstimateId: { type: 'uuid', nullable: true },
    createdAt: { type: 'timestamptz', default: () => 'now()' },
    updatedAt: { type: 'timestamptz', default: () => 'now()' },
  },
  relations: {
    uploader: {
      type: 'many-to-one',
      target: PersonEntity,
      joinColumn: { name: 'uploader_id', foreignKeyConstraintName: 'capture_uploader_fk' },
      onDelete: 'RESTRICT',
    },
    campaign: {
      type: 'many-to-one',
      target: CampaignEntity,
      joinColumn: { name: 'campaign_id', foreignKeyConstraintName: 'capture_campaign_fk' },
      onDelete: 'SET NULL',
      nullable: true,
    },
    latestEstimate: {
      type: 'many-to-one',
      target: EstimateEntity,
      joinColumn: { name: 'latest_estimate_id', foreignKeyConstraintName: 'capture_latest_estimate_fk' },
      onDelete: 'RESTRICT',
      nullable: true,
    },
  },
  uniques: [
    { name: 'capture_sha256_key', columns: ['labId', 'sha256'] },
    { name: 'capture_number_key', columns: ['labId', 'number'] },
  ],
  indices: [
    { name: 'capture_lab_idx', columns: ['labId', 'id'] },
    { name: 'capture_campaign_idx', columns: ['campaignId'] },
    {
      name: 'capture_unread_idx',
      columns: ['state'],
      where: "state = ANY (ARRAY['received'::text, 'reading'::text])",
    },
  ],
});
