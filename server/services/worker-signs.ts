import { hostname } from 'node:os';
import type { DataSource } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';

const DEAD_AFTER_SECONDS = 6;

interface Heartbeat {
  id: string;
  pid: number;
  lockNames: string[];
}

/** This worker process, as others see it in the database. */
export class WorkerSigns {
  readonly #dataSource: DataSource;
  readonly #id = uuidv7();
  readonly #host = hostname();
  readonly #lockNames = new Set<string>();

  constructor(dataSource: DataSource) {
    this.#dataSource = dataSource;
  }

  /** Notes a name under which this process locks jobs. */
  addLockName(name: string): void {
    this.#lockNames.add(name);
  }

  /** Gives a sign of life. */
  async beat(): Promise<void> {
    await this.#dataSource.query(
      `INSERT INTO worker_heartbeat (id, host, pid, lock_names) VALUES ($1, $2, $3, $4)
       ON CONFLICT (id) DO UPDATE SET seen_at = now(), lock_names = excluded.lock_names`,
      [this.#id, this.#host, process.pid, [...this.#lockNames]],
    );
  }

  /** Takes this process's row away, at an orderly end. */
  async leave(): Promise<void> {
    await this.#dataSource.query('DELETE FROM worker_heartbeat WHERE id = $1', [this.#id]);
  }

  /**
   * Frees the jobs of workers that gave no sign for six seconds.
   * @returns how many workers were dead.
   */
  async sweep(): Promise<number> {
    const silent = `seen_at < now() - make_interval(secs => ${DEAD_AFTER_SECONDS})`;
    const dead = await this.#free(`${silent} AND id <> $1`, [this.#id], () => true);
    return dead + (await this.#freeOrphans());
  }

  /** At start: frees the jobs of processes of this machine that are no longer there, without waiting. */
  freePredecessors(): Promise<number> {
    return this.#free('host = $1 AND id <> $2', [this.#host, this.#id], ({ pid }) => !isAlive(pid));
  }

  /** Jobs that are locked under a name which no living worker has, such as one killed before its first sign. */
  async #freeOrphans(): Promise<number> {
    const orphans = await this.#dataSource.query<{ name: string }[]>(
      `SELECT DISTINCT locked_by AS name FROM graphile_worker.jobs
       WHERE locked_at < now() - make_interval(secs => ${DEAD_AFTER_SECONDS})
         AND NOT EXISTS (SELECT 1 FROM worker_heartbeat WHERE jobs.locked_by = ANY (lock_names))`,
    );
    if (orphans.length > 0) {
      await this.#dataSource.query('SELECT graphile_worker.force_unlock_workers($1)', [
        orphans.map(({ name }) => name),
      ]);
    }
    return orphans.length;
  }

  async #free(
    condition: string,
    parameters: string[],
    isDead: (heartbeat: Heartbeat) => boolean,
  ): Promise<number> {
    return this.#dataSource.transaction(async (manager) => {
      const found = await manager.query<Heartbeat[]>(
        `SELECT id, pid, lock_names AS "lockNames" FROM worker_heartbeat WHERE ${condition} FOR UPDATE SKIP LOCKED`,
        parameters,
      );
      const dead = found.filter(isDead);
      if (dead.length === 0) return 0;
      await manager.query('SELECT graphile_worker.force_unlock_workers($1)', [
        dead.flatMap(({ lockNames }) => lockNames),
      ]);
      await manager.query('DELETE FROM worker_heartbeat WHERE id = ANY ($1)', [dead.map(({ id }) => id)]);
      await manager.query(`SELECT pg_notify('jobs:insert', '{"r":"${uuidv7()}","count":1}')`);
      return dead.length;
    });
  }
}

function isAlive(pid: number): boolean {
  if (pid === process.pid) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error instanceof Error && 'code' in error && error.code === 'EPERM';
  }
}
