import type { Columns } from './columns.ts';
import { concat } from './decode.ts';
import type { DecimalMark } from './number-text.ts';
import { refuse } from './problems.ts';
import type { Delimiter } from './split-line.ts';

const LONGEST_LINE = 1_048_576;
const EXACT = 9_007_199_254_740_992;
const LARGEST_EXACT_POWER = 22;
const POWERS = Float64Array.from({ length: LARGEST_EXACT_POWER + 1 }, (_, exponent) =>
  Number(`1e${exponent}`),
);

const LF = 10;
const CR = 13;
const BLANK = 32;
const TAB = 9;
const QUOTE = 34;
const MINUS = 45;
const PLUS = 43;
const ZERO = 48;
const NINE = 57;

export interface ScanLayout {
  delimiter: Delimiter;
  decimalMark: DecimalMark;
  /** For each column of the file: its place among the wanted ones, or -1. */
  places: number[];
  /** Per wanted column: power of ten that its numbers are multiplied by, exactly. */
  shifts: number[];
  /** Lines before this one (counted from 1) are passed over. */
  firstLine: number;
}

/** Takes a line that isn't a row of plain numbers. */
export type OddLine = (bytes: Uint8Array, line: number) => void;

/**
 * Reads rows of plain numbers straight from bytes; whatever else a line holds goes to `odd`.
 * A number is exact: digits up to 2^53 and powers of ten up to 10^22 give the correctly rounded double by one
 * multiplication or division; all others go through `Number`.
 */
export class RowScanner {
  /** Number of the line that the next byte belongs to, from 1. */
  line = 1;
  /** Line of the latest row, 0 before the first. */
  lastRowLine = 0;
  private rest: Uint8Array[] = [];
  private restBytes = 0;
  private skipLineFeed = false;
  private oddSince = true;

  constructor(
    private readonly layout: ScanLayout,
    private readonly columns: Columns,
    private readonly odd: OddLine,
    /** Called before the first row that follows odd lines. */
    private readonly resume: (line: number) => void,
  ) {}

  /** Takes the next block of the file. */
  feed(block: Uint8Array): void {
    let from = 0;
    if (this.skipLineFeed && block.length > 0) {
      if (block[0] === LF) from = 1;
      this.skipLineFeed = false;
    }
    let end = block.length;
    while (end > from && block[end - 1] !== LF && block[end - 1] !== CR) end -= 1;
    if (end === from) {
      this.keep(block.subarray(from));
      return;
    }
    if (this.restBytes > 0) {
      let cut = from;
      while (block[cut] !== LF && block[cut] !== CR) cut += 1;
      this.keep(block.subarray(from, cut));
      const first = concat([...this.rest, block.subarray(cut, cut + 1)]);
      this.rest = [];
      this.restBytes = 0;
      this.scan(first, 0, first.length);
      from = cut + 1;
      if (block[cut] === CR) {
        if (from === block.length) this.skipLineFeed = true;
        else if (block[from] === LF) from += 1;
      }
    }
    if (from < end) {
      this.scan(block, from, end);
      if (block[end - 1] === CR && end === block.length) this.skipLineFeed = true;
    }
    if (end < block.length) this.keep(block.subarray(Math.max(end, from)));
  }

  /** Reads what is left after the last line end. */
  finish(): void {
    if (this.restBytes === 0) return;
    const last = concat([...this.rest, Uint8Array.of(LF)]);
    this.rest = [];
    this.restBytes = 0;
    this.scan(last, 0, last.length);
  }

  private keep(part: Uint8Array): void {
    if (part.length === 0) return;
    this.rest.push(part.slice());
    this.restBytes += part.length;
    if (this.restBytes > LONGEST_LINE) this.refuseLine();
  }

  private refuseLine(): never {
    refuse(
      'lineTooLong',
      `Line ${this.line} is longer than 1 MiB, the longest that is read.`,
      'Export one point per line.',
      this.line,
    );
  }

  /** Scans whole lines: `bytes[to - 1]` is a line end. */
  private scan(bytes: Uint8Array, from: number, to: number): void {
    let at = from;
    while (at < to) {
      if (this.line >= this.layout.firstLine) {
        const after = this.row(bytes, at, to);
        if (after >= 0) {
          at = after;
          continue;
        }
      }
      let end = at;
      while (bytes[end] !== LF && bytes[end] !== CR) end += 1;
      if (end - at > LONGEST_LINE) this.refuseLine();
      if (this.line >= this.layout.firstLine) {
        this.oddSince = true;
        this.odd(bytes.subarray(at, end), this.line);
      }
      this.line += 1;
      at = end + (bytes[end] === CR && end + 1 < to && bytes[end + 1] === LF ? 2 : 1);
    }
  }

  /** Reads one line as a row of plain numbers; returns the place after it, or -1 where it isn't one. */
  private row(bytes: Uint8Array, from: number, to: number): number {
    const { columns, layout } = this;
    const { places, shifts } = layout;
    const count = places.length;
    const decimal = layout.decimalMark.charCodeAt(0);
    const delimiter = layout.delimiter.charCodeAt(0);
    const blanks = delimiter === BLANK;
    const tabs = delimiter === TAB;
    if (columns.rows === columns.capacity) columns.reserve();
    const { data, rows } = columns;
    let at = from;
    let byte = bytes[at];
    for (let column = 0; column < count; column += 1) {
      while (byte === BLANK || (byte === TAB && !tabs)) byte = bytes[++at];
      const place = places[column];
      if (place < 0) {
        while (
          byte !== delimiter &&
          byte !== LF &&
          byte !== CR &&
          byte !== QUOTE &&
          !(blanks && byte === TAB)
        )
          byte = bytes[++at];
        if (byte === QUOTE) return -1;
      } else {
        const start = at;
        let negative = false;
        if (byte === MINUS) {
          negative = true;
          byte = bytes[++at];
        } else if (byte === PLUS) byte = bytes[++at];
        let mantissa = 0;
        let digits = at;
        while (byte >= ZERO && byte <= NINE) {
          mantissa = mantissa * 10 + (byte - ZERO);
          byte = bytes[++at];
        }
        digits = at - digits;
        let exponent = shifts[place];
        if (byte === decimal) {
          byte = bytes[++at];
          const fraction = at;
          while (byte >= ZERO && byte <= NINE) {
            mantissa = mantissa * 10 + (byte - ZERO);
            byte = bytes[++at];
          }
          digits += at - fraction;
          exponent -= at - fraction;
        }
        if (digits === 0) return -1;
        if (byte === 69 || byte === 101) {
          byte = bytes[++at];
          let sign = 1;
          if (byte === MINUS) {
            sign = -1;
            byte = bytes[++at];
          } else if (byte === PLUS) byte = bytes[++at];
          const first = at;
          let written = 0;
          while (byte >= ZERO && byte <= NINE) {
            written = written * 10 + (byte - ZERO);
            byte = bytes[++at];
          }
          if (at === first || at - first > 4) return -1;
          exponent += sign * written;
        }
        let value: number;
        if (mantissa < EXACT && exponent >= -LARGEST_EXACT_POWER && exponent <= LARGEST_EXACT_POWER)
          value = exponent < 0 ? mantissa / POWERS[-exponent] : mantissa * POWERS[exponent];
        else {
          value = this.careful(bytes, start, at, shifts[place]);
          if (!Number.isFinite(value)) return -1;
        }
        data[place][rows] = negative ? -value : value;
      }
      while (byte === BLANK || (byte === TAB && !tabs)) byte = bytes[++at];
      if (column + 1 < count && !blanks) {
        if (byte !== delimiter) return -1;
        byte = bytes[++at];
      } else if (column + 1 < count && (byte === LF || byte === CR)) return -1;
    }
    while (byte === delimiter || byte === BLANK || byte === TAB) byte = bytes[++at];
    if (byte !== LF && byte !== CR) return -1;
    if (this.oddSince) {
      this.resume(this.line);
      this.oddSince = false;
    }
    columns.rows = rows + 1;
    this.lastRowLine = this.line;
    this.line += 1;
    return at + (byte === CR && at + 1 < to && bytes[at + 1] === LF ? 2 : 1);
  }

  /** The double nearest to the number written in these bytes, without its sign. */
  private careful(bytes: Uint8Array, from: number, to: number, shift: number): number {
    let text = '';
    for (let i = from; i < to; i += 1) text += String.fromCharCode(bytes[i]);
    const [digits, exponent = '0'] = text.replace(/^[+-]/, '').replace(',', '.').toLowerCase().split('e');
    return Number(`${digits}e${Number(exponent) + shift}`);
  }
}
