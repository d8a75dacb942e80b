import { availableParallelism } from 'node:os';
import { Piscina } from 'piscina';
import type { LevelUnit, PointsQuery } from '../../shared/capture.ts';
import type { EngineEstimate, EstimateOptions, ExclusionRequest } from '../../shared/estimate.ts';
import type { Settings } from '../../shared/settings.ts';
import { busy } from '../services/problems.ts';

/** Which stored trace a task works on. */
export interface TraceKey {
  captureId: string;
  traceIndex: number;
}

export interface EstimateTask extends TraceKey {
  sha256: string;
  settings: Settings;
  exclusions: ExclusionRequest[];
  options: Partial<EstimateOptions>;
}

export interface PointsTask extends TraceKey {
  query: PointsQuery;
}

export type PointsAnswer = { unit: LevelUnit; hz: Float64Array } & (
  { form: 'exact'; level: Float64Array } | { form: 'buckets'; min: Float64Array; max: Float64Array }
);

export interface ThreadPool {
  /** Computes on a thread, never on the event loop. */
  estimate(task: EstimateTask): Promise<EngineEstimate>;
  points(task: PointsTask): Promise<PointsAnswer>;
  /** Readies every thread, so that nobody waits for compiling. */
  warmUp(): Promise<void>;
  close(): Promise<void>;
}

const MOST_WAITING = 200;

/**
 * Worker threads that compute what-ifs and thin points. Each keeps the traces that it used last in memory.
 * @param databaseUrl where a thread loads traces from, on a connection of its own.
 */
export function createThreadPool(databaseUrl: string): ThreadPool {
  const source = import.meta.url.endsWith('.ts');
  const threads = Math.max(2, availableParallelism() - 1);
  const pool = new Piscina({
    filename: new URL(source ? './tasks-from-source.mjs' : './tasks.js', import.meta.url).href,
    execArgv: [],
    minThreads: threads,
    maxThreads: threads,
    workerData: { databaseUrl },
  });
  const run = (name: string, task: EstimateTask | PointsTask) => {
    if (pool.queueSize >= MOST_WAITING)
      throw busy('Too many computations wait; try again in some seconds.', 2);
    return pool.run(task, { name });
  };
  return {
    estimate: async (task) => run('estimate', task),
    points: async (task) => run('points', task),
    warmUp: async () => {
      await Promise.all(Array.from({ length: threads }, () => pool.run(null, { name: 'warmUp' })));
    },
    close: () => pool.destroy(),
  };
}
