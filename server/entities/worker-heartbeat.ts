import { EntitySchema } from 'typeorm';

/** A worker process's sign of life and the names under which it locks jobs. */
export interface WorkerHeartbeat {
  id: string;
  host: string;
  pid: number;
  lockNames: string[];
  startedAt: Date;
  seenAt: Date;
}

export const WorkerHeartbeatEntity = new EntitySchema<WorkerHeartbeat>({
  name: 'worker_heartbeat',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'worker_heartbeat_pk' },
    host: { type: 'text' },
    pid: { type: 'int' },
    lockNames: { type: 'text', array: true },
    startedAt: { type: 'timestamptz', default: () => 'now()' },
    seenAt: { type: 'timestamptz', default: () => 'now()' },
  },
});
