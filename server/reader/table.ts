import { Columns } from './columns.ts';
import { decodeText } from './decode.ts';
import { parseCell } from './number-text.ts';
import { refuse } from './problems.ts';
import { commentText, isBlankLine, splitLine, withoutEmptyTail } from './split-line.ts';
import type { ScanLayout } from './row-scanner.ts';

const MOST_KEPT_LINES = 2000;
const MOST_KEPT_IN_ALL = 50_000;
const MOST_ANCHORS = 200_000;
const MOST_SEGMENTS = 20_000;

/** A cell or row without a value, and where it stands. */
export interface Lost {
  count: number;
  /** The first of their lines. */
  lines: number[];
}

/** Rows that follow each other without other text between. */
export interface Segment {
  fromRow: number;
  toRow: number;
  firstLine: number;
  /** Lines of text before it, since the segment before. */
  before: { text: string; line: number }[];
  /** Rows among `before` that begin like data but hold no point. */
  broken: Lost;
}

/** Power of ten for a unit glued to a cell of this column, or null where the unit doesn’t belong there. */
export type ShiftOfUnit = (unit: string) => number | null;

const lost = (): Lost => ({ count: 0, lines: [] });

function note(record: Lost, line: number): void {
  record.count += 1;
  if (record.lines.length < 20) record.lines.push(line);
}

/** Gathers rows, careful ones included, and what stands between them. */
export class Table {
  readonly columns: Columns;
  readonly segments: Segment[] = [];
  lastLine = 0;
  /** Rows whose line doesn’t follow from the one before. */
  private readonly anchors: { row: number; line: number }[] = [];
  private before: Segment['before'] = [];
  private broken = lost();
  private textSince = true;
  private kept = 0;

  constructor(
    private readonly layout: ScanLayout,
    private readonly shiftOf: ShiftOfUnit[],
    /** True where the first wanted column is the axis, so that a row without it has no place. */
    private readonly hasAxis: boolean,
  ) {
    this.columns = new Columns(shiftOf.length);
  }

  /** The line of a row; null in files that are interrupted too often to know. */
  lineOfRow(row: number): number | null {
    let low = 0;
    let high = this.anchors.length - 1;
    if (high < 0 || (this.anchors.length >= MOST_ANCHORS && row >= this.anchors[high].row)) return null;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (this.anchors[middle].row <= row) low = middle;
      else high = middle - 1;
    }
    return this.anchors[low].line + row - this.anchors[low].row;
  }

  /** A row is about to come at this line. */
  resume(line: number): void {
    const anchor = this.anchors.at(-1);
    const { rows } = this.columns;
    if ((!anchor || anchor.line + rows - anchor.row !== line) && this.anchors.length < MOST_ANCHORS)
      this.anchors.push({ row: rows, line });
    const current = this.segments.at(-1);
    if (current && !this.textSince) {
      current.broken.count += this.broken.count;
      current.broken.lines.push(...this.broken.lines);
      this.broken = lost();
      return;
    }
    if (current) current.toRow = this.columns.rows;
    if (this.segments.length >= MOST_SEGMENTS)
      refuse(
        'tooManyBlocks',
        `By line ${line} the rows of numbers have been interrupted by text more than 20,000 times.`,
        'Export one table of numbers per file, without text between its rows.',
        line,
      );
    this.segments.push({
      fromRow: this.columns.rows,
      toRow: -1,
      firstLine: line,
      before: this.before,
      broken: this.broken,
    });
    this.before = [];
    this.broken = lost();
    this.textSince = false;
  }

  /** Takes a line that isn't plain numbers: a row with quotes, units or gaps, or text between the rows. */
  odd(bytes: Uint8Array, line: number): void {
    if (bytes.length === 0) return;
    const text = decodeText(bytes);
    if (isBlankLine(text) && !/[-]{2,}/.test(text)) return;
    if (commentText(text) !== null) {
      this.text(text, line);
      return;
    }
    const cells = splitLine(text, this.layout.delimiter);
    const read = this.careful(cells);
    if (read) {
      this.resume(line);
      this.columns.push(read);
      this.lastLine = line;
      return;
    }
    if (this.isBroken(cells)) note(this.broken, line);
    else this.text(text, line);
  }

  /** Closes the last segment; returns the rows after it that begin like data but hold no point, and the text after it. */
  finish(): { broken: Lost; text: Segment['before'] } {
    const last = this.segments.at(-1);
    if (last) last.toRow = this.columns.rows;
    const tail = this.textSince ? lost() : this.broken;
    return { broken: tail, text: this.before };
  }

  private text(text: string, line: number): void {
    if (!this.textSince && this.segments.length > 0) {
      const current = this.segments.at(-1);
      if (current) {
        current.broken.count += this.broken.count;
        current.broken.lines.push(...this.broken.lines);
      }
      this.broken = lost();
    }
    this.textSince = true;
    if (this.before.length >= MOST_KEPT_LINES || this.kept >= MOST_KEPT_IN_ALL) return;
    this.kept += 1;
    this.before.push({ text: text.slice(0, 400), line });
  }

  /** Values of the wanted columns, NaN where a cell has none; null where the line is no row. */
  private careful(cells: string[]): number[] | null {
    const { places, decimalMark, shifts } = this.layout;
    if (withoutEmptyTail(cells).length > places.length) return null;
    const values = new Array<number>(this.shiftOf.length).fill(Number.NaN);
    let numbers = 0;
    let filled = 0;
    for (let column = 0; column < places.length; column += 1) {
      const place = places[column];
      const text = cells[column] ?? '';
      if (place < 0 || text === '') continue;
      const cell = parseCell(text, decimalMark, shifts[place]);
      if (cell.kind === 'text' && numbers === 0) return null;
      filled += 1;
      if (cell.kind !== 'number') continue;
      const shift = cell.unit === '' ? shifts[place] : this.shiftOf[place](cell.unit);
      if (shift === null) continue;
      const exact = shift === shifts[place] ? cell : parseCell(text, decimalMark, shift);
      values[place] = exact.kind === 'number' ? exact.value : Number.NaN;
      numbers += 1;
    }
    if (this.hasAxis) return Number.isNaN(values[0]) ? null : values;
    return filled > 0 ? values : null;
  }

  /** A row that begins like data: its first cell is a number or a sign of a missing value. */
  private isBroken(cells: string[]): boolean {
    const first = cells.find((_, column) => this.layout.places[column] === 0) ?? cells[0];
    const filled = cells.filter((cell) => cell !== '');
    if (filled.length === 0) return false;
    return (
      parseCell(first ?? '', this.layout.decimalMark).kind !== 'text' &&
      filled.every((cell) => parseCell(cell, this.layout.decimalMark).kind !== 'text')
    );
  }
}
