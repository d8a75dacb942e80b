import type { EntityManager } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';

interface AuditRecord {
  labId: string;
  personId: string | null;
  action: string;
  objectId: string;
  detail?: Record<string, unknown>;
}

/** Writes into the trail who did what, in the transaction that does it. */
export async function recordAudit(manager: EntityManager, record: AuditRecord): Promise<void> {
  await manager.query(
    'INSERT INTO audit_entry (id, lab_id, person_id, action, object_id, detail) VALUES ($1, $2, $3, $4, $5, $6)',
    [uuidv7(), record.labId, record.personId, record.action, record.objectId, record.detail ?? {}],
  );
}
