import { type EngineEstimate } from '../../shared/estimate.ts';
import { Settings } from '../../shared/settings.ts';
import { estimateDensity } from '../../server/engine/estimate.ts';
import { simulateCapture } from '../support/simulator/capture.ts';
import type { SimulatedCapture } from '../support/simulator/spec.ts';
import { specOf, type Cell } from './cells.ts';

/** What the engine made of one simulated capture, held against what is true. */
export interface Trial {
  /** Estimate less truth; null where no density was given. */
  errorDb: number | null;
  covered: boolean | null;
  widthDb: number | null;
  effectivePoints: number | null;
  /** The plain mean of all points, which nothing but noise has moved; null where there are signals. */
  plainDb: number | null;
  verdict: EngineEstimate['averagingCheck']['verdict'];
  fits: EngineEstimate['averagingCheck']['fits'];
  /** Level error that the check names for what it says fits. */
  levelErrorDb: number | null;
  falseSpurs: number;
  missedSpurs: number;
  /** What the ledger's lines miss of its total. */
  ledgerGapDb: number;
  stops: string[];
  /** Processor time of the estimate. */
  engineMs: number;
}

/** A spur is told right when it stands within this many RBW of a true one. */
const NEAR_IN_RBW = 4;

/** Simulates a cell's capture number `index`, has the engine estimate it, and judges the estimate. */
export function runTrial(cell: Cell, seed: number, index: number): Trial {
  const capture = simulateCapture(specOf(cell, seed, index));
  const settings = Settings.parse(
    Object.fromEntries(
      Object.entries(cell.stated).map(([name, value]) => [name, { value, origin: { kind: 'command' } }]),
    ),
  );
  const before = process.cpuUsage();
  const estimate = estimateDensity({
    trace: { frequencyHz: capture.frequencyHz, level: capture.levelDbm, unit: 'dBm' },
    sha256: '',
    traceIndex: 0,
    settings,
    exclusions: [],
  });
  const { user, system } = process.cpuUsage(before);
  return judge(cell, capture, estimate, (user + system) / 1000);
}

function judge(cell: Cell, capture: SimulatedCapture, estimate: EngineEstimate, engineMs: number): Trial {
  const { truth } = capture;
  const { density, averagingCheck: check, spurs } = estimate;
  const near = NEAR_IN_RBW * cell.spec.rbwHz;
  const fitting = check.likelihoods.find(({ id }) => id === check.fits);
  const total = estimate.ledger.find(({ kind }) => kind === 'total');
  const walked = estimate.ledger
    .filter(({ kind }) => kind !== 'total')
    .reduce((sum, { valueDb }) => sum + valueDb, 0);
  const isTrue =
    density && density.lowDbmPerHz <= truth.densityDbmPerHz && truth.densityDbmPerHz <= density.highDbmPerHz;
  return {
    errorDb: density ? density.dbmPerHz - truth.densityDbmPerHz : null,
    covered: isTrue,
    widthDb: density ? density.highDbmPerHz - density.lowDbmPerHz : null,
    effectivePoints: density?.effectivePoints ?? null,
    plainDb: truth.spurs.length > 0 ? null : plainMeanDb(capture.levelDbm),
    verdict: check.verdict,
    fits: check.fits,
    levelErrorDb: fitting?.levelErrorDb ?? null,
    falseSpurs: spurs.filter(({ hz }) => !truth.spurs.some((one) => Math.abs(one.hz - hz) <= near)).length,
    missedSpurs: truth.spurs.filter(({ hz }) => !spurs.some((one) => Math.abs(one.hz - hz) <= near)).length,
    ledgerGapDb: total ? Math.abs(walked - total.valueDb) : 0,
    stops: estimate.findings.filter(({ severity }) => severity === 'stop').map(({ code }) => code),
    engineMs,
  };
}

function plainMeanDb(levels: Float64Array): number {
  let sum = 0;
  for (const level of levels) sum += Math.pow(10, level / 10);
  return 10 * Math.log10(sum / levels.length);
}
