export type DecimalMark = '.' | ',';

/** A cell of a table: a number with the unit glued to it, a sign of a missing value, or other text. */
export type Cell = { kind: 'number'; value: number; unit: string } | { kind: 'missing' } | { kind: 'text' };

const MISSING_CELL: Cell = { kind: 'missing' };
const TEXT_CELL: Cell = { kind: 'text' };
const LONGEST_NUMBER = 100;

const UNIT = '([A-Za-zµμ°%Ω√²/\'"][\\wµμ°%Ω√²/()·*]*)?';
const WITH_POINT = new RegExp(`^([+-]?(?:\\d+\\.?\\d*|\\.\\d+))(?:[eE]([+-]?\\d{1,4}))?\\s*${UNIT}$`);
const WITH_COMMA = new RegExp(`^([+-]?(?:\\d+,?\\d*|,\\d+))(?:[eE]([+-]?\\d{1,4}))?\\s*${UNIT}$`);
const MISSING =
  /^(?:[-–—*.?\s]*|[+-]?(?:nan|1\.#qnan|1\.#inf|inf|infinity)|n\/?a|#n\/a|null|none|nil|void|undef(?:ined)?|invalid|over(?:load|flow|range)?|under(?:flow|range)?|missing|empty)$/i;

/** U+2212 and its look-alikes before a digit become `-`; no-break and thin blanks become blanks. */
export function plainSigns(text: string): string {
  return text
    .replace(/[\u2212\uff0d\u2010\u2011\u2012](?=[\d.,])/g, '-')
    .replace(/[\u00a0\u2007\u2009\u202f]/g, ' ');
}

/** A cell that says that no value is there: NaN, `---`, blank, overload. */
export function isMissing(text: string): boolean {
  return MISSING.test(text);
}

/**
 * One cell of a table.
 * @param text the cell without surrounding blanks or quotes
 * @param shift power of ten that the number is multiplied by, exactly: 6 for MHz to Hz
 * @returns a finite number with its unit (`''` where none), `missing` for NaN, `---`, infinities and `1e400`, or `text`
 */
export function parseCell(text: string, decimalMark: DecimalMark, shift = 0): Cell {
  if (text.length > LONGEST_NUMBER) return TEXT_CELL;
  const plain = plainSigns(text).trim();
  const match = (decimalMark === '.' ? WITH_POINT : WITH_COMMA).exec(plain);
  if (match) {
    const digits = decimalMark === '.' ? match[1] : match[1].replace(',', '.');
    const value = Number(`${digits}e${Number(match[2] ?? 0) + shift}`);
    return Number.isFinite(value) ? { kind: 'number', value, unit: match[3] ?? '' } : MISSING_CELL;
  }
  return isMissing(plain) ? MISSING_CELL : TEXT_CELL;
}

/** A number in running text, alone: settings, counts. `null` where it isn't one or could be read in two ways. */
export function parseLooseNumber(text: string, decimalMark: DecimalMark | null): number | null {
  const plain = plainSigns(text).replace(/\s+/g, '');
  if (/^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d{1,4})?$/i.test(plain)) {
    if (decimalMark === ',' && /^[+-]?\d{1,3}\.\d{3}$/.test(plain)) return null;
    return finite(Number(plain));
  }
  if (/^[+-]?(?:\d+,\d*|,\d+)(?:e[+-]?\d{1,4})?$/i.test(plain)) {
    if (decimalMark !== ',' && /^[+-]?[1-9]\d{0,2},\d{3}$/.test(plain)) return null;
    return finite(Number(plain.replace(',', '.')));
  }
  if (/^[+-]?\d{1,3}(?:,\d{3})+(?:\.\d+)?$/.test(plain)) return finite(Number(plain.replaceAll(',', '')));
  if (/^[+-]?\d{1,3}(?:\.\d{3})+(?:,\d+)?$/.test(plain))
    return finite(Number(plain.replaceAll('.', '').replace(',', '.')));
  if (/^[+-]?\d{1,3}(?:['’]\d{3})+(?:\.\d+)?$/.test(plain)) return finite(Number(plain.replace(/['’]/g, '')));
  return null;
}

function finite(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
