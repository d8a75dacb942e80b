import type { ReaderProblem } from '../../shared/capture.ts';
import { countWords, frequencyWords } from '../../shared/quantities.ts';
import type { Settings } from '../../shared/settings.ts';
import { levelRange } from './levels.ts';
import { problem } from './problems.ts';

type FileSetting = { origin: { kind: string; line?: number } } | undefined;

const lineOf = (setting: FileSetting) => (setting?.origin.kind === 'file' ? setting.origin.line : undefined);

/** What the settings say against what the axis is: span, ends, number of points, RBW. `rows` counts lost points too. */
export function checkAxis(
  settings: Settings,
  frequencyHz: Float64Array,
  rows: number,
  made: boolean,
): ReaderProblem[] {
  const problems: ReaderProblem[] = [];
  const first = frequencyHz[0];
  const last = frequencyHz[frequencyHz.length - 1];
  const span = last - first;
  const spacing = span / Math.max(1, frequencyHz.length - 1);
  const { startHz, stopHz, spanHz, centreHz, statedPoints, rbwHz } = settings;
  const slack = Math.max(2.5 * spacing, 0.02 * span);
  const range = `${frequencyWords(first, 9)} to ${frequencyWords(last, 9)}`;
  const advice = 'Check that settings and trace belong together; the trace’s own frequencies are used.';
  if (!made) {
    const ends: [string, typeof startHz, number][] = [
      ['start', startHz, first],
      ['stop', stopHz, last],
    ];
    const off = ends.find(([, stated, found]) => stated && Math.abs(stated.value - found) > slack);
    if (off?.[1])
      problems.push(
        problem(
          'axisDisagrees',
          'caution',
          `The file states a ${off[0]} frequency of ${frequencyWords(off[1].value, 9)}, but its points run from ${range}.`,
          advice,
          lineOf(off[1]),
        ),
      );
    else if (spanHz && Math.abs(spanHz.value - span) > slack)
      problems.push(
        problem(
          'spanDisagrees',
          'caution',
          `The file states a span of ${frequencyWords(spanHz.value, 9)}, but its points cover ${frequencyWords(span, 9)}.`,
          advice,
          lineOf(spanHz),
        ),
      );
    else if (centreHz && Math.abs(centreHz.value - (first + last) / 2) > slack)
      problems.push(
        problem(
          'centreDisagrees',
          'caution',
          `The file states a centre frequency of ${frequencyWords(centreHz.value, 9)}, but its points run from ${range}.`,
          advice,
          lineOf(centreHz),
        ),
      );
  }
  if (statedPoints && statedPoints.value !== rows)
    problems.push(
      problem(
        'pointsDisagree',
        'caution',
        `The file states ${countWords(statedPoints.value)} points but has ${countWords(rows)}.`,
        rows < statedPoints.value
          ? 'It may be cut short: export it again, or go on with the points that are there.'
          : 'Check that the file holds one trace.',
        lineOf(statedPoints),
      ),
    );
  if (rbwHz && span > 0 && rbwHz.value > span)
    problems.push(
      problem(
        'rbwAboveSpan',
        'caution',
        `The RBW, ${frequencyWords(rbwHz.value)}, is above the span of the points, ${frequencyWords(span)}.`,
        'Check the unit of the RBW and of the frequencies.',
        lineOf(rbwHz),
      ),
    );
  return problems;
}

/** Levels that hardly can be noise: all the same, or many at one lowest value. */
export function checkLevels(level: Float64Array, name: string): ReaderProblem[] {
  const { lowest, highest } = levelRange(level);
  if (lowest === highest)
    return [
      problem(
        'constantLevel',
        'caution',
        `All ${countWords(level.length)} levels of “${name}” are ${lowest} dBm.`,
        'Check that the trace was live when it was saved.',
      ),
    ];
  let atLowest = 0;
  for (let i = 0; i < level.length; i += 1) if (level[i] === lowest) atLowest += 1;
  if (atLowest > 10 && atLowest > 0.05 * level.length && highest - lowest > 3)
    return [
      problem(
        'bottomLine',
        'caution',
        `${countWords(atLowest)} of ${countWords(level.length)} levels of “${name}” stand at the lowest value, ${lowest} dBm.`,
        'The display’s lower end may cut the noise: lower the reference level or widen the range and export again.',
      ),
    ];
  return [];
}
