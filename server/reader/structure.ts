import { type Cell, type DecimalMark, parseCell } from './number-text.ts';
import { refuse } from './problems.ts';
import { commentText, type Delimiter, isBlankLine, splitLine, withoutEmptyTail } from './split-line.ts';
import { isUnit } from './units.ts';

const MOST_COLUMNS = 4096;
const SAMPLE_LINES = 400;

/** How the rows of numbers are written, and where they begin. */
export interface Structure {
  delimiter: Delimiter;
  decimalMark: DecimalMark;
  columns: number;
  /** Index of the first row in the head's lines. */
  firstRow: number;
  /** The first rows, cell by cell. */
  sample: string[][];
}

interface Reading {
  delimiter: Delimiter;
  decimalMark: DecimalMark;
}

const READINGS: Reading[] = [
  { delimiter: '\t', decimalMark: '.' },
  { delimiter: ';', decimalMark: '.' },
  { delimiter: ',', decimalMark: '.' },
  { delimiter: '|', decimalMark: '.' },
  { delimiter: ' ', decimalMark: '.' },
  { delimiter: '\t', decimalMark: ',' },
  { delimiter: ';', decimalMark: ',' },
  { delimiter: '|', decimalMark: ',' },
  { delimiter: ' ', decimalMark: ',' },
  { delimiter: ',', decimalMark: ',' },
];

const DATE_OR_TIME = /^\d{1,4}[-/.]\d{1,2}[-/.]\d{1,4}(?:[ T].*)?$|^\d{1,2}:\d{2}(?::\d{2}.*)?$/;

/** `N` number or missing value, `D` date or time, `T` other text, `.` empty. */
function cellSign(cell: string, decimalMark: DecimalMark): string {
  if (cell === '') return '.';
  const parsed: Cell = parseCell(cell, decimalMark);
  if (parsed.kind === 'missing') return 'N';
  if (parsed.kind === 'number') return parsed.unit === '' || isUnit(parsed.unit) ? 'N' : 'T';
  return DATE_OR_TIME.test(cell) ? 'D' : 'T';
}

interface Row {
  index: number;
  cells: string[];
}

interface Run {
  columns: number;
  /** True where some cells are dates or other text: a wrong delimiter leaves such cells too. */
  text: boolean;
  rows: Row[];
}

/** The cells of a row of numbers, or null for any other line. */
function numericRow(
  line: string,
  { delimiter, decimalMark }: Reading,
): { cells: string[]; sign: string } | null {
  const cells = withoutEmptyTail(splitLine(line, delimiter));
  if (cells.length === 0 || cells.length > MOST_COLUMNS * 2) return null;
  if (!cells.some((cell) => parseCell(cell, decimalMark).kind === 'number')) return null;
  const signs = cells.map((cell) => cellSign(cell, decimalMark));
  const text = signs.filter((sign) => sign === 'T' || sign === 'D').length;
  if (text > 0) {
    const numbers = signs.filter((sign) => sign === 'N').length;
    const first = signs.find((sign) => sign !== '.');
    if (first === 'T' || numbers < 2 || text > numbers) return null;
  }
  return { cells, sign: signs.map((sign) => (sign === 'D' || sign === 'T' ? 'T' : 'N')).join('') };
}

/** The rows of a run from the first to the last that has its commonest kinds of cells. */
function settled(rows: (Row & { sign: string })[]): Run {
  const counts = new Map<string, number>();
  for (const { sign } of rows) counts.set(sign, (counts.get(sign) ?? 0) + 1);
  const [common] = [...counts].sort((a, b) => b[1] - a[1])[0];
  const first = rows.findIndex(({ sign }) => sign === common);
  const last = rows.findLastIndex(({ sign }) => sign === common);
  return { columns: common.length, text: common.includes('T'), rows: rows.slice(first, last + 1) };
}

/** Runs of rows of numbers; blank and comment lines don't end a run, other text does. */
function runsOf(lines: string[], reading: Reading): Run[] {
  const runs: (Row & { sign: string })[][] = [];
  let current: (Row & { sign: string })[] | null = null;
  lines.forEach((line, index) => {
    if (isBlankLine(line) || commentText(line) !== null) return;
    const row = numericRow(line, reading);
    if (!row) {
      current = null;
      return;
    }
    if (current === null) {
      current = [];
      runs.push(current);
    }
    current.push({ index, ...row });
  });
  return runs.map(settled);
}

const BIG_ENOUGH = 50;

/** True where a run goes on where the one before stopped: only text stands between. */
function continues(before: Run, run: Run, { decimalMark }: Reading): boolean {
  if (before.columns !== run.columns || before.rows.length < 2) return false;
  const number = (row: Row, column: number) => {
    const cell = parseCell(row.cells[column] ?? '', decimalMark);
    return cell.kind === 'number' ? cell.value : Number.NaN;
  };
  return Array.from({ length: run.columns }, (_, column) => column).some((column) => {
    const all = [...before.rows, ...run.rows.slice(0, 50)];
    if (!strictlyMonotonic(all, column, decimalMark)) return false;
    const last = number(before.rows[before.rows.length - 1], column);
    const step = (last - number(before.rows[0], column)) / (before.rows.length - 1);
    return (number(run.rows[0], column) - last) / step < 6 + before.rows.length * 0.05;
  });
}

const longestOf = (runs: Run[]) => runs.reduce((longest, { rows }) => Math.max(longest, rows.length), 0);

/** The first run that is the data, not a small table above it. */
function dataRun(runs: Run[], reading: Reading): Run {
  const longest = longestOf(runs);
  let index = runs.findIndex(({ rows }) => rows.length >= Math.min(longest / 2, BIG_ENOUGH));
  while (index > 0 && continues(runs[index - 1], runs[index], reading)) index -= 1;
  return runs[index];
}

function strictlyMonotonic(rows: Row[], column: number, decimalMark: DecimalMark): boolean {
  const values = rows
    .map(({ cells }) => parseCell(cells[column] ?? '', decimalMark))
    .flatMap((cell) => (cell.kind === 'number' ? [cell.value] : []));
  if (values.length < 2) return false;
  const up = values[1] > values[0];
  return values.every((value, i) => i === 0 || (up ? value > values[i - 1] : value < values[i - 1]));
}

/** True where `-104,56` was cut at its decimal comma: the second of two columns is bare digits of one width. */
function looksLikeCutDecimals(run: Run, reading: Reading): boolean {
  if (reading.delimiter !== ',' || run.columns !== 2) return false;
  const widths = new Set(run.rows.map(({ cells }) => cells[1]?.length));
  return (
    widths.size === 1 &&
    run.rows.every(({ cells }) => /^\d+$/.test(cells[1] ?? '') && /^[+-]?\d+$/.test(cells[0])) &&
    !strictlyMonotonic(run.rows, 0, reading.decimalMark)
  );
}

/** `69,500,-107,32`: decimal commas between delimiting commas. */
function refuseCommaInCommas(run: Run, reading: Reading, lines: string[]): void {
  if (reading.delimiter !== ',' || run.columns < 4 || run.columns % 2 !== 0 || run.rows.length < 3) return;
  const fractions = Array.from({ length: run.columns / 2 }, (_, i) => 2 * i + 1);
  const cut = fractions.every(
    (column) =>
      run.rows.every(
        ({ cells }) => /^\d+$/.test(cells[column] ?? '') && /^[+-]?\d+$/.test(cells[column - 1] ?? ''),
      ) && new Set(run.rows.map(({ cells }) => cells[column].length)).size === 1,
  );
  if (!cut || strictlyMonotonic(run.rows, 0, '.')) return;
  const line = run.rows[0].index;
  refuse(
    'commaBothWays',
    `Line ${line + 1} (“${lines[line].trim().slice(0, 40)}”) uses the comma both as decimal mark and between columns.`,
    'Export with semicolons or tabs between the columns, or with decimal points.',
    line + 1,
  );
}

function hintedDelimiter(lines: string[]): Delimiter | null {
  const hint = /^\s*"?sep=(.)"?\s*$/i.exec(lines.find((line) => line.trim() !== '') ?? '');
  switch (hint?.[1]) {
    case ',':
    case ';':
    case '\t':
    case '|':
      return hint[1];
    default:
      return null;
  }
}

function bestReading(lines: string[]): { reading: Reading; run: Run } | null {
  const hint = hintedDelimiter(lines);
  const quoted = lines.some((line) => line.includes('"'));
  let best: { reading: Reading; run: Run; score: number } | null = null;
  for (const reading of READINGS) {
    if (reading.delimiter === ',' && reading.decimalMark === ',' && !quoted) continue;
    const runs = runsOf(lines, reading);
    if (runs.length === 0) continue;
    const run = dataRun(runs, reading);
    const rows = longestOf(runs.filter(({ columns }) => columns === run.columns));
    const axis = Array.from({ length: Math.min(run.columns, 3) }, (_, column) => column).some((column) =>
      strictlyMonotonic(run.rows.slice(0, 50), column, reading.decimalMark),
    );
    let score = rows;
    if (run.columns > 1) score *= axis ? 1.5 : 1.2;
    if (run.text) score *= 0.6;
    if (looksLikeCutDecimals(run, reading)) score *= 0.5;
    if (reading.delimiter === hint) score *= 3;
    if (reading.decimalMark === ',') score *= 0.99;
    if (best === null || score > best.score) best = { reading, run, score };
  }
  return best;
}

/** Thousands separators that could as well be decimal marks: asked for, never guessed. */
function refuseGroupedNumbers(lines: string[]): void {
  const index = lines.findIndex((line) =>
    /^\s*"?[+-]?\d{1,3}(?:[,.'’ \u00a0]\d{3})+(?:[.,]\d+)?\s*(?:Hz|kHz|MHz)?"?[\s;,|\t]+"?[+-]?\d/.test(line),
  );
  if (index < 0) return;
  refuse(
    'thousandsSeparators',
    `Line ${index + 1} (“${lines[index].trim().slice(0, 40)}”): do the marks within its numbers part thousands or decimals? Both readings are possible.`,
    'Export without thousands separators and with one decimal mark.',
    index + 1,
  );
}

function hasTooManyColumns(line: string): boolean {
  if (line.length <= MOST_COLUMNS) return false;
  return [',', ';', '\t', '|'].some((delimiter) => {
    let count = 0;
    for (
      let at = line.indexOf(delimiter);
      at >= 0 && count < MOST_COLUMNS;
      at = line.indexOf(delimiter, at + 1)
    )
      count += 1;
    return count >= MOST_COLUMNS;
  });
}

/**
 * Finds the rows of numbers in the head of a file: what parts the cells, the decimal mark, where they begin.
 * @param lines the head's lines
 * @returns null where there is no row of numbers
 * @throws UnreadableFile where the marks can be read in two ways, or over 4,096 columns
 */
export function findStructure(lines: string[]): Structure | null {
  const wide = lines.findIndex(hasTooManyColumns);
  if (wide >= 0)
    refuse(
      'tooManyColumns',
      `Line ${wide + 1} has more than 4,096 columns, the most that are read.`,
      'Export one point per line, with one column per trace.',
      wide + 1,
    );
  let best = bestReading(lines.slice(0, SAMPLE_LINES));
  if ((best === null || best.run.rows.length < 3) && lines.length > SAMPLE_LINES)
    best = bestReading(lines) ?? best;
  if (best === null || best.run.rows.length < 2) refuseGroupedNumbers(lines);
  if (best === null) return null;
  refuseCommaInCommas(best.run, best.reading, lines);
  const { run, reading } = best;
  return {
    ...reading,
    columns: run.columns,
    firstRow: run.rows[0].index,
    sample: run.rows.slice(0, 200).map(({ cells }) => cells),
  };
}
