import type { DataSource } from 'typeorm';
import type { LevelUnit, ReaderProblem, Sparkline, Understanding } from '../../shared/capture.ts';
import type { EstimateRequest } from '../../shared/estimate.ts';
import type { Settings } from '../../shared/settings.ts';
import { estimateDensity } from '../engine/estimate.ts';
import { CaptureEntity } from '../entities/capture.ts';
import { TraceEntity, type Trace } from '../entities/trace.ts';
import { bucketed } from './buckets.ts';
import { lockCapture } from './change-capture.ts';
import { effectiveSettings } from './setting-changes.ts';
import { toBytes } from './trace-bytes.ts';
import { writeEstimate } from './write-estimate.ts';

/** What the reader made of a file. */
interface Reading {
  traces: {
    name: string;
    unit: LevelUnit;
    unitInFile: string;
    frequencyHz: Float64Array;
    level: Float64Array;
    uniform: boolean;
    settings: Settings;
  }[];
  settings: Settings;
  problems: ReaderProblem[];
  understanding: Understanding;
}

const SPARKLINE_PARTS = 96;

function sparklineOf({ frequencyHz, level }: Reading['traces'][number]): Sparkline {
  const parts = Math.min(SPARKLINE_PARTS, level.length);
  const { min, max } = bucketed(frequencyHz, level, 0, level.length, parts);
  const rounded = (levels: Float64Array) => Array.from(levels, (value) => Math.round(value * 100) / 100);
  return { min: rounded(min), max: rounded(max), spurs: [] };
}

function traceRow(captureId: string, trace: Reading['traces'][number], index: number): Trace {
  const { frequencyHz, level } = trace;
  const points = level.length;
  let minLevel = Infinity;
  let maxLevel = -Infinity;
  for (const value of level) {
    if (value < minLevel) minLevel = value;
    if (value > maxLevel) maxLevel = value;
  }
  const firstHz = frequencyHz[0];
  const lastHz = frequencyHz[points - 1];
  return {
    captureId,
    index,
    name: trace.name,
    unit: trace.unit,
    unitInFile: trace.unitInFile,
    points,
    firstHz,
    lastHz,
    spacingHz: points > 1 ? (lastHz - firstHz) / (points - 1) : 0,
    uniform: trace.uniform,
    minLevel,
    maxLevel,
    settings: trace.settings,
    frequencies: toBytes(frequencyHz),
    levels: toBytes(level),
  };
}

const ON_ARRIVAL: EstimateRequest = { traceIndex: 0, exclusions: [] };

/**
 * Stores what was read and the estimate on arrival in one transaction. Where another worker was quicker, nothing is
 * changed.
 */
export async function writeReading(
  dataSource: DataSource,
  captureId: string,
  reading: Reading,
  readerVersion: string,
): Promise<void> {
  const [first] = reading.traces;
  const traces = reading.traces.map((trace, index) => traceRow(captureId, trace, index));
  const sparkline = sparklineOf(first);
  await dataSource.transaction(async (manager) => {
    const capture = await lockCapture(manager, captureId);
    if (capture.state !== 'reading') return;
    await manager.getRepository(TraceEntity).insert(traces);
    const settings = effectiveSettings(reading.settings, first.settings, capture.settingChanges);
    const spanHz = traces[0].lastHz - traces[0].firstHz;
    const read = {
      fileSettings: reading.settings,
      problems: reading.problems,
      understanding: reading.understanding,
      sparkline,
      readerVersion,
      progressPoints: null,
      progressOfPoints: null,
      points: first.level.length,
      centreHz: traces[0].firstHz + spanHz / 2,
      spanHz,
      rbwHz: settings.rbwHz?.value ?? null,
    };
    await manager.getRepository(CaptureEntity).update({ id: captureId }, read);
    const body = estimateDensity({
      trace: first,
      sha256: capture.sha256,
      traceIndex: 0,
      settings,
      exclusions: [],
    });
    await writeEstimate(
      manager,
      { ...capture, ...read },
      { body, request: ON_ARRIVAL, change: 'As uploaded', authorId: null },
    );
  });
}
