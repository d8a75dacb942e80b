import { workerData } from 'piscina';
import { z } from 'zod';
import type { EngineEstimate } from '../../shared/estimate.ts';
import { estimateDensity } from '../engine/estimate.ts';
import { bucketed } from '../services/buckets.ts';
import { warmUpTrace } from '../services/warm-up-trace.ts';
import type { EstimateTask, PointsAnswer, PointsTask } from './pool.ts';
import { TraceCache } from './traces.ts';

const { databaseUrl } = z.object({ databaseUrl: z.string() }).parse(workerData);
const traces = new TraceCache(databaseUrl);

/** One computation on a stored trace. */
export async function estimate(task: EstimateTask): Promise<EngineEstimate> {
  const trace = await traces.get(task);
  const { sha256, traceIndex, settings, exclusions, options } = task;
  return estimateDensity({ trace, sha256, traceIndex, settings, exclusions, options });
}

const WARM_UP_RUNS = 4;

/** Computes on a made-up trace some times, so that the first real task finds compiled code. */
export function warmUp(): void {
  const trace = { ...warmUpTrace(), unit: 'dBm' as const };
  const origin = { kind: 'assumed' as const, reason: 'warm-up' };
  const settings = {
    rbwHz: { value: 10_000, origin },
    averagingScale: { value: 'log' as const, origin },
    sweeps: { value: 20, origin },
  };
  for (let run = 0; run < WARM_UP_RUNS; run += 1) {
    estimateDensity({ trace, sha256: '', traceIndex: 0, settings, exclusions: [] });
  }
}

/** Index of the first frequency that isn't below `hz`. */
function lowerBound(frequencyHz: Float64Array, hz: number): number {
  let low = 0;
  let high = frequencyHz.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (frequencyHz[middle] < hz) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** The points of a part of the span: each of them where they fit, else the lowest and highest per bucket. */
export async function points({ query, ...key }: PointsTask): Promise<PointsAnswer> {
  const { frequencyHz, level, unit } = await traces.get(key);
  const from = query.fromHz === undefined ? 0 : lowerBound(frequencyHz, query.fromHz);
  const after = query.toHz === undefined ? frequencyHz.length : lowerBound(frequencyHz, query.toHz);
  const to = query.toHz !== undefined && frequencyHz[after] === query.toHz ? after + 1 : after;
  if (to - from <= query.buckets) {
    return { form: 'exact', unit, hz: frequencyHz.slice(from, to), level: level.slice(from, to) };
  }
  return { form: 'buckets', unit, ...bucketed(frequencyHz, level, from, to, query.buckets) };
}
