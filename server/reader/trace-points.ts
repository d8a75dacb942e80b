import type { ReaderProblem } from '../../shared/capture.ts';
import { countWords, frequencyWords, plural } from '../../shared/quantities.ts';
import { problem, refuse } from './problems.ts';

export interface PointsOfTrace {
  frequencyHz: Float64Array;
  level: Float64Array;
}

/** Points with both a frequency and a level. */
export function withoutGaps(frequencyHz: Float64Array, level: Float64Array): PointsOfTrace {
  let kept = 0;
  for (let i = 0; i < level.length; i += 1)
    if (!Number.isNaN(level[i]) && !Number.isNaN(frequencyHz[i])) kept += 1;
  if (kept === level.length) return { frequencyHz, level };
  const points = { frequencyHz: new Float64Array(kept), level: new Float64Array(kept) };
  let at = 0;
  for (let i = 0; i < level.length; i += 1) {
    if (Number.isNaN(level[i]) || Number.isNaN(frequencyHz[i])) continue;
    points.frequencyHz[at] = frequencyHz[i];
    points.level[at] = level[i];
    at += 1;
  }
  return points;
}

function sorted({ frequencyHz, level }: PointsOfTrace): PointsOfTrace {
  const order = Array.from(frequencyHz.keys()).sort((a, b) => frequencyHz[a] - frequencyHz[b]);
  return {
    frequencyHz: Float64Array.from(order, (index) => frequencyHz[index]),
    level: Float64Array.from(order, (index) => level[index]),
  };
}

/** Rows that say the same twice become one; other levels at one frequency are refused. */
function withoutDoubles(
  points: PointsOfTrace,
  name: string,
  line: number,
  problems: ReaderProblem[],
): PointsOfTrace {
  const { frequencyHz, level } = points;
  const keep: number[] = [0];
  let differing = 0;
  let example = 0;
  for (let i = 1; i < frequencyHz.length; i += 1) {
    const last = keep[keep.length - 1];
    if (frequencyHz[i] !== frequencyHz[last]) keep.push(i);
    else if (level[i] !== level[last]) {
      differing += 1;
      example = frequencyHz[i];
    }
  }
  if (differing > 0)
    refuse(
      'duplicateFrequencies',
      `“${name}” has ${differing === 1 ? 'one frequency' : `${countWords(differing)} rows`} with different levels at the same frequency, such as ${frequencyWords(example, 9)}, and no pattern of repeated sweeps.`,
      'Export one sweep, or frequencies with more digits.',
      line,
    );
  const doubles = frequencyHz.length - keep.length;
  if (doubles === 0) return points;
  problems.push(
    problem(
      'duplicateRows',
      'note',
      `${plural(doubles, 'row')} of “${name}” repeat${doubles === 1 ? 's' : ''} the frequency and level of another and ${doubles === 1 ? 'counts' : 'count'} once.`,
      'Nothing to do, unless the rows were meant to differ.',
      line,
    ),
  );
  return {
    frequencyHz: Float64Array.from(keep, (index) => frequencyHz[index]),
    level: Float64Array.from(keep, (index) => level[index]),
  };
}

/**
 * Puts points in ascending order and takes doubled rows out; what was done is told.
 * @throws UnreadableFile where different levels stand at one frequency
 */
export function inOrder(
  points: PointsOfTrace,
  name: string,
  line: number,
  problems: ReaderProblem[],
): PointsOfTrace {
  const { frequencyHz, level } = points;
  let rising = true;
  let falling = true;
  let equal = false;
  for (let i = 1; i < frequencyHz.length; i += 1) {
    if (frequencyHz[i] < frequencyHz[i - 1]) rising = false;
    else if (frequencyHz[i] > frequencyHz[i - 1]) falling = false;
    else equal = true;
  }
  let ordered = points;
  if (!rising && falling) {
    ordered = { frequencyHz: frequencyHz.reverse(), level: level.reverse() };
    problems.push(
      problem(
        'descending',
        'note',
        `“${name}” runs from high to low frequency; it is read in ascending order.`,
        'Nothing to do.',
        line,
      ),
    );
  } else if (!rising) {
    ordered = sorted(points);
    problems.push(
      problem(
        'unsorted',
        'caution',
        `The frequencies of “${name}” aren’t in order; they were sorted.`,
        'Check that the file holds one sweep.',
        line,
      ),
    );
  }
  return equal || (!rising && !falling) ? withoutDoubles(ordered, name, line, problems) : ordered;
}
