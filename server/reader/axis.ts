import type { Settings } from '../../shared/settings.ts';
import { frequencyWords } from '../../shared/quantities.ts';
import { refuse } from './problems.ts';

/** A stretch of rows with one frequency per row, in the order of the file. */
export interface Stretch {
  fromRow: number;
  toRow: number;
  /** Rows are taken every `every`, from `fromRow`: 2 where two levels stand at each frequency. */
  every: number;
}

/** An evenly spaced axis from `startHz` with `stepHz`; each value rounded once. */
function evenAxis(startHz: number, stepHz: number, points: number): Float64Array {
  return Float64Array.from({ length: points }, (_, index) => startHz + stepHz * index);
}

/** An axis from start to stop over `steps` steps; ends exactly at `stopHz`. */
function axisBetween(startHz: number, stopHz: number, steps: number, points: number): Float64Array {
  return Float64Array.from({ length: points }, (_, index) =>
    index === steps ? stopHz : startHz + ((stopHz - startHz) * index) / steps,
  );
}

const usable = (hz: number | undefined): hz is number => hz !== undefined && Number.isFinite(hz);

/**
 * Makes the axis of a file without a frequency column, from start and stop, centre and span, or start and step.
 * @param points number of rows
 * @returns the axis in Hz with the words for how it was made, or null where the file doesn't state enough
 * @throws UnreadableFile where there are more rows than the file says
 */
export function madeAxis(
  settings: Settings,
  stepHz: number | null,
  points: number,
): { frequencyHz: Float64Array; words: string } | null {
  const centre = settings.centreHz?.value;
  const span = settings.spanHz?.value;
  const start = settings.startHz?.value ?? (usable(centre) && usable(span) ? centre - span / 2 : undefined);
  const stop = settings.stopHz?.value ?? (usable(centre) && usable(span) ? centre + span / 2 : undefined);
  const stated = settings.statedPoints?.value;
  if (usable(start) && usable(stop) && stop !== start) {
    if (stated !== undefined && points > stated)
      refuse(
        'pointsContradict',
        `The file states ${stated} points but has ${points}, so the axis can’t be made from start and stop.`,
        'Export the frequency column too, or correct the number of points in the file.',
        settings.statedPoints?.origin.kind === 'file' ? settings.statedPoints.origin.line : undefined,
      );
    const bins = stepHz !== null && Math.abs((stop - start) / stepHz - (stated ?? points)) < 0.01;
    const steps = bins ? (stated ?? points) : (stated ?? points) - 1;
    if (steps < 1) return null;
    return {
      frequencyHz: axisBetween(start, stop, steps, points),
      words: `made from ${frequencyWords(start, 9)} to ${frequencyWords(stop, 9)}`,
    };
  }
  if (usable(start) && stepHz !== null)
    return {
      frequencyHz: evenAxis(start, stepHz, points),
      words: `made from ${frequencyWords(start, 9)} in steps of ${frequencyWords(stepHz, 9)}`,
    };
  if (usable(centre) && stepHz !== null && stated !== undefined)
    return {
      frequencyHz: evenAxis(centre - (stepHz * (stated - 1)) / 2, stepHz, points),
      words: `made about ${frequencyWords(centre, 9)} in steps of ${frequencyWords(stepHz, 9)}`,
    };
  return null;
}

/** Sign of the direction in which most of the axis runs. */
function direction(axis: Float64Array): number {
  let balance = 0;
  for (let i = 1; i < axis.length; i += 1) {
    if (axis[i] > axis[i - 1]) balance += 1;
    else if (axis[i] < axis[i - 1]) balance -= 1;
  }
  return balance < 0 ? -1 : 1;
}

function sameAxis(axis: Float64Array, first: number, second: number, points: number, every: number): boolean {
  for (let i = 0; i < points; i += 1) if (axis[first + i * every] !== axis[second + i * every]) return false;
  return true;
}

/**
 * Cuts rows whose axis runs more than once into sweeps: one below another, or several levels at each frequency.
 * @param axis one frequency per row
 * @returns the stretches relative to the first row; one where nothing repeats
 */
export function repeatedSweeps(axis: Float64Array): Stretch[] {
  const whole = [{ fromRow: 0, toRow: axis.length, every: 1 }];
  const rows = axis.length;
  if (rows < 4) return whole;
  const forward = direction(axis);
  const starts = [0];
  for (let i = 1; i < rows; i += 1) if ((axis[i] - axis[i - 1]) * forward < 0) starts.push(i);
  const points = starts[1] ?? rows;
  if (starts.length > 1 && points > 1) {
    const equal = starts.every(
      (start, k) =>
        start === k * points && (start + points <= rows ? sameAxis(axis, 0, start, points, 1) : k > 0),
    );
    if (equal)
      return starts
        .filter((start) => start + points <= rows)
        .map((start) => ({ fromRow: start, toRow: start + points, every: 1 }));
  }
  let times = 1;
  while (times < rows && axis[times] === axis[0]) times += 1;
  if (times > 1 && rows % times === 0 && rows / times > 1) {
    for (let k = 0; k < rows; k += times)
      for (let i = 1; i < times; i += 1) if (axis[k + i] !== axis[k]) return whole;
    for (let k = times; k < rows; k += times) if (axis[k] === axis[k - times]) return whole;
    return Array.from({ length: times }, (_, i) => ({ fromRow: i, toRow: rows, every: times }));
  }
  return whole;
}

/** True where the points stand on a straight line within half a step, as rounding leaves them. */
export function isUniform(axis: Float64Array): boolean {
  const last = axis.length - 1;
  if (last < 2) return true;
  const step = (axis[last] - axis[0]) / last;
  for (let i = 0; i <= last; i += 1)
    if (Math.abs(axis[i] - (axis[0] + step * i)) > 0.51 * Math.abs(step)) return false;
  return true;
}
