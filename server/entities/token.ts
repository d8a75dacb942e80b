import { EntitySchema } from 'typeorm';
import { LabEntity } from './lab.ts';
import { PersonEntity } from './person.ts';

/** A personal token for scripts, limited to one lab; the secret itself is never stored. */
export interface Token {
  id: string;
  labId: string;
  personId: string;
  name: string;
  /** SHA-256 of the secret. */
  hash: Buffer;
  createdAt: Date;
  lastUsedAt: Date | null;
  expiresAt: Date | null;
  revokedAt: Date | null;
}

export const TokenEntity = new EntitySchema<Token>({
  name: 'token',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'token_pk' },
    labId: { type: 'uuid', foreignKey: { target: LabEntity, name: 'token_lab_fk', onDelete: 'CASCADE' } },
    personId: {
      type: 'uuid',
      foreignKey: { target: PersonEntity, name: 'token_person_fk', onDelete: 'CASCADE' },
    },
    name: { type: 'text' },
    hash: { type: 'bytea', select: false },
    createdAt: { type: 'timestamptz', default: () => 'now()' },
    lastUsedAt: { type: 'timestamptz', nullable: true },
    expiresAt: { type: 'timestamptz', nullable: true },
    revokedAt: { type: 'timestamptz', nullable: true },
  },
  uniques: [{ name: 'token_hash_key', columns: ['hash'] }],
  indices: [{ name: 'token_person_idx', columns: ['personId'] }],
});
