import { displayText } from './display-text.ts';
import { keyMeaning } from './setting-names.ts';
import { bareKey, plainWords } from './setting-words.ts';
import { commentText, type Delimiter, isBlankLine, splitLine, withoutEmptyTail } from './split-line.ts';
import { frequencyUnit, isAngleUnit, isUnit, levelScale, timeUnit } from './units.ts';

export interface HeaderCell {
  /** Made safe to show. */
  name: string;
  /** As written; empty where the header states none. */
  unit: string;
}

export interface Header {
  cells: HeaderCell[];
  /** Indices of the header's lines in the head. */
  lines: number[];
  /** True where a cell names a frequency, a level, an index or a unit. */
  recognised: boolean;
}

/** Name and unit of one header cell: `Frequency [MHz]`, `Level (dBm)`, `Freq, Hz`, `Level/dBm/Hz`, `level_dBm`, `MHz`. */
export function nameAndUnit(text: string): HeaderCell {
  const plain = text.trim();
  const named = (name: string, unit: string) => ({
    name: displayText(unit === '' ? name : name.replace(/[\s,:/_-]+$/, '')),
    unit: unit.trim(),
  });
  if (isUnit(plain)) return named('', plain);
  for (const bracket of plain.matchAll(/[[({<]\s*([^\])}>]*(?:\([^)]*\))?[^\])}>]*?)\s*[\])}>]/g)) {
    const inner = bracket[1].replace(/^in\s+/i, '');
    if (isUnit(inner)) return named(plain.replace(bracket[0], ' '), inner);
  }
  for (const cut of plain.matchAll(/\s*(?:,|\/|:|_|\s-\s|\bin\b|\s)\s*/g)) {
    const rest = plain.slice(cut.index + cut[0].length);
    if (isUnit(rest)) return named(plain.slice(0, cut.index), rest);
  }
  const glued = /^(.*[a-z])((?:[kMG]?Hz)|dBm|dBuV|dBµV)$/.exec(plain);
  return glued ? named(glued[1], glued[2]) : named(plain, '');
}

const FREQUENCY_WORDS = /^(?:f|x|fx|hz|khz|mhz|ghz)$|freq|frecuencia/;
const INDEX_WORDS =
  /^(?:no|nr|num|number|n|i|idx|index|point|points|pt|pts|punkt|sample|samples|bin|bins|row|zeile|punto|id|nummer|numero)$/;
const TIME_WORDS = /^(?:time|zeit|temps|tiempo|date|datum|timestamp|uhrzeit|hora|heure)/;
const LEVEL_WORDS =
  /level|ampl|power|magn|trace|pegel|leistung|niveau|nivel|puissance|potencia|psd|density|dichte|spectr|max|min|avg|average|rms|peak|mean|signal|noise|rauschen|clear|write|hold|amp|^y\d*$|mittel|value|sweep|^tr[a-z]?\d|^ch\d/;
const OTHER_WORDS =
  /phase|limit|grenz|marker|status|flag|quality|comment|bemerk|pass|antennafactor|uncertainty|temperature/;

export type ColumnKind = 'frequency' | 'offset' | 'index' | 'time' | 'level' | 'other' | 'unknown';

/** What a column is by its header alone. */
export function columnKind({ name, unit }: HeaderCell): ColumnKind {
  const bare = bareKey(name);
  const hash = /^\s*(?:#|n°|№|nº)\s*$/.test(plainWords(name));
  if (unit !== '' && frequencyUnit(unit) !== null) {
    if (/rbw|bandwidth|span|step/.test(bare)) return 'other';
    return /offset|versatz|ablage/.test(bare) ? 'offset' : 'frequency';
  }
  if (unit !== '' && isAngleUnit(unit)) return 'other';
  if (unit !== '' && timeUnit(unit) !== null && levelScale(unit) === null) return 'time';
  if (unit !== '' && levelScale(unit) !== null) return OTHER_WORDS.test(bare) ? 'other' : 'level';
  if (hash || INDEX_WORDS.test(bare)) return 'index';
  if (/offset|versatz|ablage/.test(bare) && /f/.test(bare) && !/level|ampl/.test(bare)) return 'offset';
  if (FREQUENCY_WORDS.test(bare)) return 'frequency';
  if (TIME_WORDS.test(bare)) return 'time';
  if (OTHER_WORDS.test(bare)) return 'other';
  return LEVEL_WORDS.test(bare) ? 'level' : 'unknown';
}

/** Joins units that stand apart from their names until the count fits: `Frequency (MHz) Level (dBm)`. */
function joinedUnits(cells: string[], columns: number): string[] {
  const joined: string[] = [];
  let surplus = cells.length - columns;
  for (const cell of cells) {
    const inner = /^[[(](.*)[\])]$/.exec(cell)?.[1] ?? cell;
    if (surplus > 0 && joined.length > 0 && isUnit(inner)) {
      joined[joined.length - 1] += ` (${inner})`;
      surplus -= 1;
    } else joined.push(cell);
  }
  return joined;
}

function headerCells(text: string, delimiter: Delimiter, columns: number): string[] | null {
  const tries: string[][] = [];
  const cells = withoutEmptyTail(splitLine(text, delimiter));
  if (delimiter === ' ' || cells.length === 1) {
    tries.push(
      text
        .trim()
        .split(/\s{2,}|\t/)
        .map((cell) => cell.trim()),
      splitLine(text, ' '),
    );
    for (const other of [',', ';', '|'] as const)
      if (text.includes(other)) tries.push(withoutEmptyTail(splitLine(text, other)));
  }
  for (const found of [cells, ...tries]) {
    const joined = found.length > columns ? joinedUnits(found, columns) : found;
    if (joined.length === columns) return joined;
  }
  if (cells.length < columns && cells.length > 1 && cells.length >= columns - 1 && delimiter !== ' ')
    return [...cells, ...Array.from({ length: columns - cells.length }, () => '')];
  return columns === 1 && cells.length > 0 ? [text.trim()] : null;
}

/** A number, with or without its unit: no header has one at a cell’s beginning, save `1st` and the like. */
const isNumber = (cell: string) =>
  /^[+-]?[\d.,]+(?:e[+-]?\d+)?(?:\s*\(?[kMG]?Hz\)?|\s*\(?dBm?\)?)?$/i.test(cell);

const LONGEST_CELL = 120;

const MARKER =
  /^\W*(?:trace\s*(?:data|\d+)?|data|begin|values?|daten|messwerte|measurement data|spectrum data|points|datos|données|donnees|start of data|curve data)\W*(?:begin|start)?\W*$/i;

/** True for a line that only says that data follow: `DATA`, `[Trace data]`, `BEGIN`. */
export function isDataMarker(line: string): boolean {
  return line.length < 200 && MARKER.test(line);
}

/**
 * The header above the first row, if there is one: one line, or names over units, commented or not.
 * @param lines the head's lines, `firstRow` the index of the first row of numbers
 */
export function findHeader(
  lines: string[],
  firstRow: number,
  delimiter: Delimiter,
  columns: number,
): Header | null {
  let units: { cells: string[]; line: number } | null = null;
  for (let index = firstRow - 1; index >= 0 && index >= firstRow - 12; index -= 1) {
    const line = lines[index];
    if (isBlankLine(line) || isDataMarker(line)) continue;
    const comment = commentText(line);
    const cells = headerCells(comment ?? line, delimiter, columns);
    if (!cells || cells.some((cell) => cell.length > LONGEST_CELL || isNumber(cell))) break;
    const onlyUnits = cells.every((cell) => cell === '' || isUnit(cell.replace(/^[[(](.*)[\])]$/, '$1')));
    if (onlyUnits && !units && cells.some((cell) => cell !== '')) {
      units = { cells, line: index };
      continue;
    }
    const named = cells.map(nameAndUnit);
    const kinds = named.map(columnKind);
    const recognised = kinds.some((kind) => kind !== 'unknown' && kind !== 'other');
    const colon = /^[^,;\t|]*[:=]/.test(comment ?? line);
    const key = keyMeaning(cells[0].replace(/[:=]\s*$/, ''));
    const allKeys = cells.every((cell) => keyMeaning(cell) !== null && keyMeaning(cell) !== 'ignored');
    const keyed = key !== null && key !== 'ignored' && columns > 1;
    const table =
      kinds.includes('frequency') && kinds.some((kind) => kind === 'level' || kind === 'unknown') && !allKeys;
    const header =
      !colon &&
      (keyed ? table : recognised || (columns > 1 && comment === null && !units)) &&
      (columns > 1 || (recognised && !/\d/.test(cells[0])));
    if (!header) break;
    const merged = units
      ? named.map((cell, i) => ({
          name: cell.name,
          unit: (units?.cells[i] ?? '').replace(/^[[(](.*)[\])]$/, '$1').trim() || cell.unit,
        }))
      : named;
    return {
      cells: merged,
      lines: units ? [index, units.line] : [index],
      recognised: recognised || units !== null,
    };
  }
  if (!units) return null;
  return { cells: units.cells.map((cell) => nameAndUnit(cell)), lines: [units.line], recognised: true };
}
