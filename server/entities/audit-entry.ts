import { EntitySchema } from 'typeorm';
import { LabEntity } from './lab.ts';
import { PersonEntity } from './person.ts';

/** Who did what to which object. Rows are written once. */
export interface AuditEntry {
  id: string;
  labId: string;
  personId: string | null;
  /** Such as `capture.uploaded`. */
  action: string;
  objectId: string;
  detail: Record<string, unknown>;
  at: Date;
}

export const AuditEntryEntity = new EntitySchema<AuditEntry>({
  name: 'audit_entry',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'audit_entry_pk' },
    labId: {
      type: 'uuid',
      foreignKey: { target: LabEntity, name: 'audit_entry_lab_fk', onDelete: 'RESTRICT' },
    },
    personId: {
      type: 'uuid',
      nullable: true,
      foreignKey: { target: PersonEntity, name: 'audit_entry_person_fk', onDelete: 'RESTRICT' },
    },
    action: { type: 'text' },
    objectId: { type: 'uuid' },
    detail: { type: 'jsonb', default: {} },
    at: { type: 'timestamptz', default: () => 'now()' },
  },
  indices: [{ name: 'audit_entry_lab_idx', columns: ['labId', 'id'] }],
});
