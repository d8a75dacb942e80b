import type { ReaderProblem, Understanding } from '../../shared/capture.ts';
import { countWords, frequencyWords, plural } from '../../shared/quantities.ts';
import type { Settings } from '../../shared/settings.ts';
import { type Block, sortBlocks } from './blocks.ts';
import { columnRoles } from './columns-roles.ts';
import { type Encoding, openFile, type OpenFile } from './decode.ts';
import { decodeText } from './decode.ts';
import { displayText } from './display-text.ts';
import { findHeader, type Header } from './header.ts';
import { buildLayout, type Layout } from './layout.ts';
import { preambleEntries } from './preamble-entries.ts';
import { condensed, lineWords, problem, refuse } from './problems.ts';
import { RowScanner } from './row-scanner.ts';
import { gatherSettings, type PreambleSettings } from './settings.ts';
import { refuseForeignText } from './sniff.ts';
import { splitLines } from './split-line.ts';
import { findStructure, type Structure } from './structure.ts';
import { Table } from './table.ts';
import { distinctNames } from './trace-names.ts';
import { blockTraces, type ReadTrace } from './traces.ts';

export { UnreadableFile } from './problems.ts';
export type { ReadTrace } from './traces.ts';

const PROGRESS_POINTS = 50_000;
const BLOCKS_PER_TURN = 8;
const MOST_TRACES = 4096;

export interface ReadResult {
  /** At least one, each with at least two points. */
  traces: ReadTrace[];
  /** What the file states for all its traces. */
  settings: Settings;
  problems: ReaderProblem[];
  understanding: Understanding;
}

export interface ReadOptions {
  fileName: string;
  /** Called about every 50,000 points; `ofPoints` is the count that the file states, else null. */
  onProgress?: (points: number, ofPoints: number | null) => void;
  signal?: AbortSignal;
}

/** What the head of a file says. */
interface Plan {
  structure: Structure;
  header: Header | null;
  headerText: string;
  preamble: string[];
  stated: PreambleSettings;
  layout: Layout;
  byNumbersAlone: boolean;
}

function headLines(file: OpenFile): string[] {
  const lines = splitLines(decodeText(file.head));
  if (!file.complete && lines.length > 1) lines.pop();
  if (lines.length > 1 && lines[lines.length - 1] === '') lines.pop();
  return lines;
}

function refuseWithoutNumbers(lines: string[], complete: boolean): never {
  const entries = preambleEntries(lines, 1, ',');
  const { settings } = gatherSettings(entries, '.', 1);
  const stated = Object.keys(settings).length;
  const last = lines.length;
  if (!complete)
    refuse(
      'noNumbers',
      'The first 256 KiB of this file hold no row of numbers.',
      'Save the trace as CSV from the analyser’s file menu and drop that.',
      1,
    );
  const header = lines.findIndex((line) => /freq|\bk?M?G?Hz\b|level|dBm|pegel|frecuencia|niveau/i.test(line));
  if (stated > 0 || header >= 0)
    refuse(
      'headerOnly',
      `The file ends at line ${last} with its ${stated > 1 ? 'settings' : 'header'}; no row of numbers follows.`,
      'Export the trace again while it is on the screen, with its data.',
      stated > 1 ? last : header + 1 || last,
    );
  refuse(
    'noNumbers',
    `This file is text without a table of numbers; it begins “${displayText(lines.find((line) => line.trim() !== '') ?? '', 60)}”.`,
    'Save the trace as CSV from the analyser’s file menu and drop that.',
    1,
  );
}

function plan(file: OpenFile): Plan {
  const lines = headLines(file);
  refuseForeignText(lines.join('\n'));
  const structure = findStructure(lines);
  if (!structure) refuseWithoutNumbers(lines, file.complete);
  const header = findHeader(lines, structure.firstRow, structure.delimiter, structure.columns);
  const roles = columnRoles(structure, header);
  const preamble = lines
    .slice(0, structure.firstRow)
    .map((line, index) => (header?.lines.includes(index) ? '' : line));
  const entries = preambleEntries(preamble, 1, structure.delimiter);
  const levelCount = roles.columns.filter(({ role }) => role === 'level').length;
  const stated = gatherSettings(entries, structure.decimalMark, levelCount);
  if (roles.timeAxis || (stated.zeroSpan && !roles.columns.some(({ role }) => role === 'frequency')))
    refuse(
      'zeroSpan',
      'This trace is level over time (zero span); a density needs level over frequency.',
      'Sweep over a span and export that trace.',
      (header?.lines[0] ?? structure.firstRow) + 1,
    );
  if (levelCount === 0)
    refuse(
      'noLevels',
      'No column of this file is a level.',
      'Export the trace with its levels in dBm.',
      (header?.lines[0] ?? structure.firstRow) + 1,
    );
  const layout = buildLayout(structure, header, roles, stated);
  const headerLine = header?.lines[0];
  return {
    structure,
    header,
    headerText: headerLine === undefined ? '' : displayText(lines[headerLine], 200),
    preamble,
    stated,
    layout,
    byNumbersAlone: roles.byNumbersAlone && structure.columns > 1,
  };
}

/** Lets timers and signals run between blocks that are there already. */
const turn = () => new Promise<void>((resolve) => setImmediate(resolve));

async function scan(
  file: OpenFile,
  { layout, stated }: Plan,
  { onProgress, signal }: ReadOptions,
): Promise<{ table: Table; lines: number; lastDataLine: number; tail: ReturnType<Table['finish']> }> {
  const table = new Table(layout.scan, layout.shiftOf, layout.hasAxis);
  const scanner = new RowScanner(
    layout.scan,
    table.columns,
    (bytes, line) => table.odd(bytes, line),
    (line) => table.resume(line),
  );
  const ofPoints = stated.settings.statedPoints?.value ?? null;
  let told = 0;
  let blocks = 0;
  for await (const block of file.blocks) {
    scanner.feed(block);
    if (onProgress && table.columns.rows - told >= PROGRESS_POINTS) {
      told = table.columns.rows;
      onProgress(told, ofPoints);
    }
    blocks += 1;
    if (blocks % BLOCKS_PER_TURN === 0) await turn();
    signal?.throwIfAborted();
  }
  scanner.finish();
  onProgress?.(table.columns.rows, ofPoints);
  const tail = table.finish();
  return {
    table,
    lines: scanner.line - 1,
    lastDataLine: Math.max(scanner.lastRowLine, table.lastLine),
    tail,
  };
}

/** Settings of a later block that differ from the first one's. */
function differing(own: Settings, first: Settings): Settings {
  const before = new Map<string, unknown>(
    Object.entries(first).map(([name, setting]) => [name, setting.value]),
  );
  return Object.fromEntries(
    Object.entries(own).filter(
      ([name, setting]) => setting !== undefined && before.get(name) !== setting.value,
    ),
  );
}

function blockPreamble(block: Block, { structure, layout }: Plan): PreambleSettings {
  const [first] = block.before;
  const lines: string[] = [];
  for (const { text, line } of block.before) lines[line - first.line] = text;
  const filled = Array.from(lines, (line) => line ?? '');
  const entries = preambleEntries(filled, first?.line ?? block.firstLine, structure.delimiter);
  return gatherSettings(entries, structure.decimalMark, layout.levels.length);
}

function blockName(before: string[], number: number): string {
  const title = before
    .map(
      (text) => /^\W*((?:trace|spectrum|sweep|messkurve|courbe|traza)\b[^,;=:]{0,40})\W*$/i.exec(text)?.[1],
    )
    .find((text) => text !== undefined && /\d/.test(text));
  return title ? displayText(title, 40) : `block ${number}`;
}

const DELIMITER_WORDS = new Map([
  [',', 'comma'],
  [';', 'semicolon'],
  ['\t', 'tab'],
  ['|', 'pipe'],
  [' ', 'blanks'],
]);

function understand(
  encoding: Encoding,
  { structure, header, layout }: Plan,
  scanned: { lines: number; lastDataLine: number },
  traces: ReadTrace[],
  axisWords: string,
): Understanding {
  const delimiter = structure.columns === 1 ? 'none' : (DELIMITER_WORDS.get(structure.delimiter) ?? 'comma');
  const headerLines = (header?.lines ?? []).map((index) => index + 1);
  const [trace] = traces;
  const points = trace.frequencyHz.length;
  const where = headerLines.length > 0 ? `header in ${lineWords(headerLines)}, ` : 'no header, ';
  const sentence = `${plural(traces.length, 'trace')} of ${countWords(points)} points from ${frequencyWords(trace.frequencyHz[0], 9)} to ${frequencyWords(trace.frequencyHz[points - 1], 9)}, axis ${axisWords}; ${where}numbers from line ${layout.scan.firstLine}; ${structure.columns === 1 ? 'one column' : `${delimiter} between columns`}, decimal ${structure.decimalMark === ',' ? 'comma' : 'point'}.`;
  return {
    encoding,
    delimiter,
    decimalMark: structure.decimalMark,
    headerLines,
    firstDataLine: layout.scan.firstLine,
    lastDataLine: scanned.lastDataLine,
    lines: scanned.lines,
    columns: layout.columns.map(({ index, name, role, unit }) => ({
      index,
      name,
      role,
      unit: displayText(unit, 20),
    })),
    axis: layout.hasAxis ? 'column' : 'startStop',
    sentence,
  };
}

function impedanceProblem(plan: Plan): ReaderProblem[] {
  const voltage = plan.layout.levels.find(({ scale }) => scale.voltage);
  if (!voltage || plan.stated.settings.impedanceOhm) return [];
  return [
    problem(
      'impedanceAssumed',
      'caution',
      `The levels are in ${voltage.scale.label} and the file doesn’t state the impedance; 50 Ω is assumed to make dBm of them.`,
      'On a 75 Ω system the levels would be 1.76 dB lower: state “Impedance,75,ohm” in the file then.',
      (plan.header?.lines[0] ?? plan.structure.firstRow) + 1,
    ),
  ];
}

/**
 * Reads a trace file by its structure alone: bytes in, traces with their axis, settings and problems out.
 * Streams: holds the head (256 KiB) and the numbers, never the file.
 * @param chunks the file's bytes, cut anywhere
 * @throws UnreadableFile where no trace can be read, with what it is, which line, and what to export instead
 * @throws the signal's reason when it is aborted
 */
export async function readTraceFile(
  chunks: AsyncIterable<Uint8Array>,
  options: ReadOptions,
): Promise<ReadResult> {
  const file = await openFile(chunks, options.signal);
  const planned = plan(file);
  const { stated, layout, structure } = planned;
  const problems: ReaderProblem[] = [...stated.problems, ...layout.problems, ...impedanceProblem(planned)];
  if (planned.byNumbersAlone)
    problems.push(
      problem(
        'columnsByNumbers',
        'note',
        'No header says what the columns are; the first that only rises or falls is taken as the frequency.',
        'Check the span that is shown.',
        structure.firstRow + 1,
      ),
    );
  const scanned = await scan(file, planned, options);
  const { table, tail } = scanned;
  const axis = layout.levels[0].axisPlace === null ? null : table.columns.data[layout.levels[0].axisPlace];
  const { blocks, footer } = sortBlocks(table, axis);
  const lastBlock = blocks.at(-1);
  if (lastBlock && footer === null) {
    lastBlock.broken.count += tail.broken.count;
    lastBlock.broken.lines.push(...tail.broken.lines);
  }
  const traces: ReadTrace[] = [];
  let axisWords = '';
  blocks.forEach((block, index) => {
    const own = index === 0 ? stated : blockPreamble(block, planned);
    const first = stated.settings;
    const merged =
      index === 0
        ? stated
        : { ...own, settings: { ...first, ...own.settings }, stepHz: own.stepHz ?? stated.stepHz };
    const made = blockTraces({
      table,
      block,
      layout,
      stated: merged,
      fileSettings: merged.settings,
      header: { line: (planned.header?.lines[0] ?? structure.firstRow) + 1, text: planned.headerText },
      title:
        blocks.length > 1
          ? blockName(index === 0 ? planned.preamble : block.before.map(({ text }) => text), index + 1)
          : '',
      impedanceOhm: merged.settings.impedanceOhm?.value ?? 50,
    });
    if (index === 0) axisWords = made.axisWords;
    problems.push(...made.problems, ...(index === 0 ? [] : own.problems));
    const extra = index === 0 ? {} : differing(own.settings, first);
    traces.push(...made.traces.map((trace) => ({ ...trace, settings: { ...extra, ...trace.settings } })));
    if (traces.length > MOST_TRACES)
      refuse(
        'tooManyTraces',
        `By line ${block.firstLine} the file holds more than 4,096 traces, the most that are read.`,
        'Export fewer traces per file.',
        block.firstLine,
      );
    if (block.interruptions.length > 0)
      problems.push(
        problem(
          'textWithinData',
          'caution',
          `Text stands between the rows of numbers (${lineWords(block.interruptions)}); it is passed over.`,
          'Check that the rows around it belong together.',
          block.interruptions[0],
        ),
      );
  });
  if (traces.length === 0)
    refuse(
      'noLevels',
      'No trace of this file has levels.',
      'Export the trace with its levels in dBm.',
      structure.firstRow + 1,
    );
  if (blocks.length > 1)
    problems.push(
      problem(
        'severalBlocks',
        'note',
        `The file holds ${blocks.length} tables one below another; each is read as traces of its own.`,
        'Choose the trace to evaluate.',
        blocks[1].firstLine,
      ),
    );
  if (footer)
    problems.push(
      problem(
        'footer',
        'note',
        `From line ${footer.fromLine} the file holds something else than the trace (${plural(footer.rows, 'row')} of numbers); it is left aside.`,
        'Nothing to do.',
        footer.fromLine,
      ),
    );
  const names = distinctNames(traces.map(({ name }) => name));
  const named = traces.map((trace, index) => ({ ...trace, name: names[index] }));
  return {
    traces: named,
    settings: stated.settings,
    problems: condensed(problems),
    understanding: understand(file.encoding, planned, scanned, named, axisWords),
  };
}
