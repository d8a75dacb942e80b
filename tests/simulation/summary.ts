import type { Cell } from './cells.ts';
import type { Trial } from './trial.ts';

/** Figures of all trials of one cell; null where a figure has no meaning. */
export interface Summary {
  name: string;
  captures: number;
  withoutDensity: number;
  covered: number;
  coverage: number | null;
  meanErrorDb: number | null;
  standardErrorDb: number | null;
  /** Mean width of the interval over that of one made from the errors' own spread. */
  widthRatio: number | null;
  /** Spread of the errors over the spread of the plain mean of all points. */
  spreadRatio: number | null;
  meanEffectivePoints: number | null;
  rightVerdicts: number;
  verdicts: Record<string, number>;
  /** Wrong verdicts given as certain: neither right nor `undetermined`. */
  wrongVerdicts: number;
  meanLevelErrorDb: number | null;
  capturesWithFalseSpurs: number;
  missedSpurs: number;
  largestLedgerGapDb: number;
  /** Captures with a stop finding, and which. */
  stopped: number;
  stops: Record<string, number>;
  engineMs: number;
}

const Z_95 = 1.959964;

const present = (values: (number | null)[]) => values.filter((value) => value !== null);
const mean = (values: number[]) =>
  values.length === 0 ? null : values.reduce((sum, value) => sum + value, 0) / values.length;

function deviation(values: number[]): number | null {
  const centre = mean(values);
  if (centre === null || values.length < 2) return null;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (values.length - 1));
}

function tally(words: string[]): Record<string, number> {
  const counts = new Map<string, number>();
  for (const word of words) counts.set(word, (counts.get(word) ?? 0) + 1);
  return Object.fromEntries([...counts].sort(([a], [b]) => a.localeCompare(b)));
}

const ratio = (above: number | null, below: number | null) =>
  above === null || below === null || below === 0 ? null : above / below;

/** Sums up the trials of a cell. */
export function summarise(cell: Cell, trials: Trial[]): Summary {
  const errors = present(trials.map(({ errorDb }) => errorDb));
  const spread = deviation(errors);
  const covered = trials.filter((trial) => trial.covered).length;
  const right = (trial: Trial) =>
    trial.verdict === cell.verdict && (cell.fits === undefined || trial.fits === cell.fits);
  return {
    name: cell.name,
    captures: trials.length,
    withoutDensity: trials.length - errors.length,
    covered,
    coverage: errors.length === 0 ? null : covered / errors.length,
    meanErrorDb: mean(errors),
    standardErrorDb: spread === null ? null : spread / Math.sqrt(errors.length),
    widthRatio: ratio(mean(present(trials.map(({ widthDb }) => widthDb))), spread && 2 * Z_95 * spread),
    spreadRatio: ratio(spread, deviation(present(trials.map(({ plainDb }) => plainDb)))),
    meanEffectivePoints: mean(present(trials.map(({ effectivePoints }) => effectivePoints))),
    rightVerdicts: trials.filter(right).length,
    verdicts: tally(trials.map(({ verdict, fits }) => (verdict === 'other' ? `other:${fits}` : verdict))),
    wrongVerdicts: trials.filter((trial) => !right(trial) && trial.verdict !== 'undetermined').length,
    meanLevelErrorDb: mean(present(trials.map(({ levelErrorDb }) => levelErrorDb))),
    capturesWithFalseSpurs: trials.filter(({ falseSpurs }) => falseSpurs > 0).length,
    missedSpurs: trials.reduce((sum, { missedSpurs }) => sum + missedSpurs, 0),
    largestLedgerGapDb: Math.max(...trials.map(({ ledgerGapDb }) => ledgerGapDb)),
    stopped: trials.filter(({ stops }) => stops.length > 0).length,
    stops: tally(trials.flatMap(({ stops }) => stops)),
    engineMs: mean(trials.map(({ engineMs }) => engineMs)) ?? 0,
  };
}
