import type { ReaderProblem } from '../../shared/capture.ts';
import { countWords, plural } from '../../shared/quantities.ts';
import type { Settings } from '../../shared/settings.ts';
import { isUniform, madeAxis, repeatedSweeps, type Stretch } from './axis.ts';
import type { Block } from './blocks.ts';
import { checkAxis, checkLevels } from './checks.ts';
import { displayText } from './display-text.ts';
import type { LevelColumn, Layout } from './layout.ts';
import { toDbm } from './levels.ts';
import { lineWords, problem, refuse } from './problems.ts';
import type { PreambleSettings } from './settings.ts';
import type { Table } from './table.ts';
import { settingsOfName } from './trace-names.ts';
import { inOrder, withoutGaps } from './trace-points.ts';

const MOST_LOST_SHARE = 0.1;
const MOST_TRACES = 4096;

/** One trace of a file. */
export interface ReadTrace {
  name: string;
  unit: 'dBm' | 'dBm/Hz';
  /** As the file writes it, or `not stated`. */
  unitInFile: string;
  /** Ascending. */
  frequencyHz: Float64Array;
  /** dBm or dBm/Hz, one per frequency. */
  level: Float64Array;
  uniform: boolean;
  /** Settings that differ from those of the file, such as the detector. */
  settings: Settings;
}

/** What the traces of one block are made of. */
export interface BlockSource {
  table: Table;
  block: Block;
  layout: Layout;
  /** The block's own preamble, or the file's. */
  stated: PreambleSettings;
  /** Settings of the file, which a trace's own ones are held against. */
  fileSettings: Settings;
  header: { line: number; text: string };
  /** Names the block where there are several; else empty. */
  title: string;
  impedanceOhm: number;
}

function strided(values: Float64Array, { fromRow, toRow, every }: Stretch): Float64Array {
  if (every === 1) return values.slice(fromRow, toRow);
  return Float64Array.from(
    { length: Math.ceil((toRow - fromRow) / every) },
    (_, i) => values[fromRow + i * every],
  );
}

function allZero(values: Float64Array): boolean {
  for (let i = 0; i < values.length; i += 1) if (values[i] !== 0 && !Number.isNaN(values[i])) return false;
  return true;
}

/** Says where points were left out; refuses when they are more than a tenth. */
function tellLost(source: BlockSource, level: Float64Array, name: string): ReaderProblem[] {
  const { table, block } = source;
  const lines = [...block.broken.lines];
  let gaps = 0;
  for (let i = 0; i < level.length; i += 1) {
    if (!Number.isNaN(level[i])) continue;
    gaps += 1;
    const line = gaps <= 20 ? table.lineOfRow(block.fromRow + i) : null;
    if (line !== null) lines.push(line);
  }
  const count = gaps + block.broken.count;
  if (count === 0) return [];
  lines.sort((a, b) => a - b);
  const where = lines.length > 0 ? ` (${lineWords(lines, count)})` : '';
  const total = level.length + block.broken.count;
  if (count > MOST_LOST_SHARE * total)
    refuse(
      'tooManyLost',
      `${countWords(count)} of ${countWords(total)} points of “${name}” have no usable level${where}; more than a tenth can’t be left out.`,
      'Export the trace again with a number in every row.',
      lines[0] ?? block.firstLine,
    );
  return [
    problem(
      'pointsLeftOut',
      'caution',
      `${plural(count, 'point')} of “${name}” ${count === 1 ? 'has' : 'have'} no usable level${where} and ${count === 1 ? 'is' : 'are'} left out.`,
      'Check these lines; the rest of the trace is used.',
      lines[0] ?? block.firstLine,
    ),
  ];
}

/** Values that differ from the one before. */
function changes(values: Float64Array): number {
  let count = 1;
  for (let i = 1; i < values.length; i += 1) if (values[i] !== values[i - 1]) count += 1;
  return count;
}

interface Axis {
  frequencyHz: Float64Array;
  made: boolean;
  words: string;
}

function axisOf(source: BlockSource, column: LevelColumn, problems: ReaderProblem[]): Axis {
  const { table, block, layout, stated } = source;
  const rows = block.toRow - block.fromRow;
  if (column.axisPlace !== null) {
    const read = table.columns.part(column.axisPlace, block.fromRow, block.toRow);
    const centreHz = stated.settings.centreHz?.value;
    const spanHz = stated.settings.spanHz?.value;
    const low = read[0];
    const high = read[rows - 1];
    const about = Math.abs(low + high) < 0.02 * Math.abs(high - low);
    const offsets =
      about && Math.min(low, high) < 0 && (spanHz === undefined || Math.abs(high - low) < 1.05 * spanHz);
    if (offsets && centreHz !== undefined && centreHz > 0) {
      problems.push(
        problem(
          'offsetAxis',
          'note',
          'The frequencies are offsets from the centre; the stated centre frequency is added.',
          'Check the span that is shown.',
          block.firstLine,
        ),
      );
      return {
        frequencyHz: read.map((value) => value + centreHz),
        made: false,
        words: 'offsets from the centre',
      };
    }
    const distinct = rows > 20 ? changes(read) : rows;
    if (distinct < rows / 2) {
      const repeats = repeatedSweeps(read);
      const made = repeats.length > 1 ? null : madeAxis(stated.settings, stated.stepHz, rows);
      if (made) {
        problems.push(
          problem(
            'axisRounded',
            'caution',
            `The frequency column has only ${countWords(distinct)} different values in ${countWords(rows)} rows; the axis is ${made.words}.`,
            'Export frequencies with more digits.',
            block.firstLine,
          ),
        );
        return { ...made, made: true };
      }
    }
    return { frequencyHz: read, made: false, words: 'from the frequency column' };
  }
  const made = madeAxis(stated.settings, stated.stepHz, rows);
  if (!made) {
    const columns = layout.columns.length;
    refuse(
      'noAxis',
      `${columns === 1 ? 'The file has one column of numbers' : 'No column of the file is a frequency'}, and start and stop frequency aren’t stated.`,
      'Export the frequency column too, or keep the preamble with start and stop.',
      block.firstLine,
    );
  }
  return { ...made, made: true };
}

function traceName(column: LevelColumn, source: BlockSource, only: boolean): string {
  const header = column.column.name;
  const stated = only ? source.stated.traceName : null;
  const generic = header === '' || /^(?:level|amplitude|power|pegel|niveau|nivel|magnitude|y)$/i.test(header);
  const name = generic && stated ? stated : header || (only ? 'Trace' : `Trace ${column.column.index}`);
  if (source.title === '') return displayText(name);
  return displayText(generic ? source.title : `${name}, ${source.title}`);
}

/**
 * The traces of one block of rows, each with its axis, in ascending order, in dBm or dBm/Hz.
 * @throws UnreadableFile where there is no axis, or more than a tenth of a trace's points are lost
 */
export function blockTraces(source: BlockSource): {
  traces: ReadTrace[];
  problems: ReaderProblem[];
  axisWords: string;
} {
  const { table, block, layout, stated } = source;
  const problems: ReaderProblem[] = [];
  const traces: ReadTrace[] = [];
  const rows = block.toRow - block.fromRow;
  const zero = layout.levels.map(({ place }) =>
    allZero(table.columns.part(place, block.fromRow, block.toRow)),
  );
  const someZero = zero.includes(true) && zero.includes(false);
  let axisWords = '';
  let checked = false;
  const axes = new Map<number | null, Axis>();
  layout.levels.forEach((column, index) => {
    const name = traceName(column, source, layout.levels.length === 1);
    if (someZero && zero[index]) {
      problems.push(
        problem(
          'unusedTrace',
          'note',
          `All levels of “${name}” are 0: an unused trace, left aside.`,
          'Nothing to do.',
          source.header.line,
        ),
      );
      return;
    }
    const numbers = table.columns.part(column.place, block.fromRow, block.toRow);
    const level = toDbm(numbers, column.scale, source.impedanceOhm);
    problems.push(...tellLost(source, level, name));
    const axis = axes.get(column.axisPlace) ?? axisOf(source, column, problems);
    axes.set(column.axisPlace, axis);
    axisWords = axis.words;
    const sweeps = axis.made ? [{ fromRow: 0, toRow: rows, every: 1 }] : repeatedSweeps(axis.frequencyHz);
    if (sweeps.length > MOST_TRACES)
      refuse(
        'tooManySweeps',
        `The file holds ${countWords(sweeps.length)} sweeps, more than the 4,096 that are read.`,
        'Export fewer sweeps per file.',
        block.firstLine,
      );
    if (sweeps.length > 1 && index === 0)
      problems.push(
        problem(
          'repeatedSweeps',
          'note',
          `The frequencies run ${countWords(sweeps.length)} times; each run is a trace of its own.`,
          'Choose the trace to evaluate.',
          block.firstLine,
        ),
      );
    const settings = {
      ...settingsOfName(name, source.header.line, source.header.text, source.fileSettings),
      ...(stated.perTrace.get(index + 1) ?? {}),
    };
    sweeps.forEach((stretch, sweep) => {
      const sweepName = sweeps.length > 1 ? `${name}, sweep ${sweep + 1}` : name;
      const points = withoutGaps(strided(axis.frequencyHz, stretch), strided(level, stretch));
      if (points.level.length < 2)
        refuse(
          'onePoint',
          points.level.length === 1
            ? `“${sweepName}” has one point; a trace needs at least two.`
            : `“${sweepName}” has no point with a level.`,
          'Export the whole trace, not a marker.',
          block.firstLine,
        );
      const ordered = inOrder(points, sweepName, block.firstLine, sweep === 0 ? problems : []);
      if (ordered.level.length < 2)
        refuse(
          'onePoint',
          `All rows of “${sweepName}” stand at one frequency; a trace needs at least two.`,
          'Export a swept trace with its frequency axis.',
          block.firstLine,
        );
      if (!checked) {
        const stretchRows = Math.ceil((stretch.toRow - stretch.fromRow) / stretch.every);
        problems.push(
          ...checkAxis(stated.settings, ordered.frequencyHz, stretchRows + block.broken.count, axis.made),
        );
        checked = true;
      }
      if (sweep < 3) problems.push(...checkLevels(ordered.level, sweepName));
      traces.push({
        name: sweepName,
        unit: column.scale.unit,
        unitInFile: column.unitInFile,
        ...ordered,
        uniform: isUniform(ordered.frequencyHz),
        settings,
      });
    });
  });
  return { traces, problems, axisWords };
}
