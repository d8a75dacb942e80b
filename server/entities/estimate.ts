import { EntitySchema } from 'typeorm';
import type { EngineEstimate, EstimateRequest, EstimateState } from '../../shared/estimate.ts';
import { PersonEntity, type Person } from './person.ts';

/** One kept computation. Rows are written once; the database lets `state` alone change. */
export interface Estimate {
  id: string;
  captureId: string;
  number: number;
  state: EstimateState;
  /** What the engine answered. */
  body: EngineEstimate;
  /** What it was asked, beside the capture's own settings. */
  request: EstimateRequest;
  change: string;
  engineVersion: string;
  /** null: made on arrival. */
  authorId: string | null;
  createdAt: Date;
  verdict: EngineEstimate['averagingCheck']['verdict'];
  verdictSummary: string;
  dbmPerHz: number | null;
  lowDbmPerHz: number | null;
  highDbmPerHz: number | null;
  expandedUncertaintyDb: number | null;
  spurs: number;
  stops: number;
  cautions: number;
  author?: Person | null;
}

export const EstimateEntity = new EntitySchema<Estimate>({
  name: 'estimate',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'estimate_pk' },
    captureId: {
      type: 'uuid',
      foreignKey: { target: 'capture', name: 'estimate_capture_fk', onDelete: 'RESTRICT' },
    },
    number: { type: 'int' },
    state: { type: 'text', default: 'working' },
    body: { type: 'jsonb', select: false },
    request: { type: 'jsonb', select: false },
    change: { type: 'text' },
    engineVersion: { type: 'text' },
    authorId: { type: 'uuid', nullable: true },
    createdAt: { type: 'timestamptz', default: () => 'now()' },
    verdict: { type: 'text' },
    verdictSummary: { type: 'text' },
    dbmPerHz: { type: 'float8', nullable: true },
    lowDbmPerHz: { type: 'float8', nullable: true },
    highDbmPerHz: { type: 'float8', nullable: true },
    expandedUncertaintyDb: { type: 'float8', nullable: true },
    spurs: { type: 'int' },
    stops: { type: 'int' },
    cautions: { type: 'int' },
  },
  relations: {
    author: {
      type: 'many-to-one',
      target: PersonEntity,
      joinColumn: { name: 'author_id', foreignKeyConstraintName: 'estimate_author_fk' },
      onDelete: 'RESTRICT',
      nullable: true,
    },
  },
  uniques: [{ name: 'estimate_number_key', columns: ['captureId', 'number'] }],
});
