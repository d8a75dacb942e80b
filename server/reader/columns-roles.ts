import type { Header, HeaderCell } from './header.ts';
import { type ColumnKind, columnKind } from './header.ts';
import { type DecimalMark, parseCell } from './number-text.ts';
import type { Structure } from './structure.ts';

export interface ColumnRole {
  index: number;
  name: string;
  /** As the file writes it; empty where it doesn't. */
  unit: string;
  role: 'frequency' | 'level' | 'ignored';
  /** The column's axis: index of a frequency column, or null where the axis must be made. */
  axis: number | null;
}

export interface Roles {
  columns: ColumnRole[];
  /** True where the frequencies are offsets from the centre. */
  offset: boolean;
  /** True where the only axis is time. */
  timeAxis: boolean;
  /** True where no header says what the columns are. */
  byNumbersAlone: boolean;
}

function numbersOf(sample: string[][], column: number, decimalMark: DecimalMark): number[] {
  return sample.map((cells) => {
    const cell = parseCell(cells[column] ?? '', decimalMark);
    return cell.kind === 'number' ? cell.value : Number.NaN;
  });
}

function monotonic(values: number[]): boolean {
  const known = values.filter((value) => !Number.isNaN(value));
  if (known.length < 2 || known.length < 0.5 * values.length) return false;
  const up = known[1] > known[0];
  return known.every((value, i) => i === 0 || (up ? value > known[i - 1] : value < known[i - 1]));
}

function counting(values: number[]): boolean {
  return (
    values.length > 1 &&
    (values[0] === 0 || values[0] === 1) &&
    values.every((value, i) => Number.isNaN(value) || value === values[0] + i)
  );
}

function gluedUnit(sample: string[][], column: number, decimalMark: DecimalMark): string {
  for (const cells of sample.slice(0, 5)) {
    const cell = parseCell(cells[column] ?? '', decimalMark);
    if (cell.kind === 'number' && cell.unit !== '') return cell.unit;
  }
  return '';
}

/**
 * What each column is: an axis, a level or left aside; by the header, else by its numbers.
 * @returns roles; a file with levels alone has no frequency column
 */
export function columnRoles(structure: Structure, header: Header | null): Roles {
  const { sample, columns, decimalMark } = structure;
  const cells: HeaderCell[] = Array.from({ length: columns }, (_, column) => {
    const stated = header?.cells[column] ?? { name: '', unit: '' };
    return stated.unit === '' ? { ...stated, unit: gluedUnit(sample, column, decimalMark) } : stated;
  });
  const values = cells.map((_, column) => numbersOf(sample, column, decimalMark));
  const empty = values.map((column) => column.every(Number.isNaN));
  const kinds: ColumnKind[] = cells.map((cell, column) => (empty[column] ? 'other' : columnKind(cell)));
  const byNumbersAlone = kinds.every((kind) => kind === 'unknown' || kind === 'other');
  const frequencies = new Set(
    kinds.flatMap((kind, column) => (kind === 'frequency' || kind === 'offset' ? [column] : [])),
  );
  const timeAxis =
    frequencies.size === 0 && kinds.some((kind, column) => kind === 'time' && monotonic(values[column]));
  if (frequencies.size === 0 && !timeAxis && columns > 1) {
    const candidates = kinds.flatMap((kind, column) =>
      kind === 'unknown' && monotonic(values[column]) ? [column] : [],
    );
    const axis = candidates.find((column) => !counting(values[column]));
    if (axis !== undefined && (kinds.some((kind) => kind === 'level') || axis < columns - 1))
      frequencies.add(axis);
    for (const column of candidates)
      if (counting(values[column]) && kinds[column] === 'unknown') kinds[column] = 'index';
  }
  const roles = cells.map((cell, index): ColumnRole => {
    const base = { index, name: cell.name, unit: cell.unit, axis: null };
    if (frequencies.has(index)) return { ...base, role: 'frequency' };
    const kind = kinds[index];
    const level =
      kind === 'level' || (kind === 'unknown' && (columns > 1 || header === null || header.recognised));
    if (!level || empty[index]) return { ...base, role: 'ignored' };
    const before = [...frequencies].filter((column) => column < index).at(-1);
    return { ...base, role: 'level', axis: before ?? [...frequencies][0] ?? null };
  });
  const used = new Set(roles.map(({ axis }) => axis));
  return {
    columns: roles.map((role) =>
      role.role === 'frequency' && !used.has(role.index) ? { ...role, role: 'ignored' } : role,
    ),
    offset: kinds.some((kind) => kind === 'offset') && !kinds.includes('frequency'),
    timeAxis,
    byNumbersAlone,
  };
}
