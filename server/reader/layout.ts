import type { ReaderProblem } from '../../shared/capture.ts';
import { frequencyWords } from '../../shared/quantities.ts';
import type { Roles, ColumnRole } from './columns-roles.ts';
import type { Header } from './header.ts';
import { parseCell } from './number-text.ts';
import { problem, refuse } from './problems.ts';
import type { ScanLayout } from './row-scanner.ts';
import type { PreambleSettings } from './settings.ts';
import type { Structure } from './structure.ts';
import type { ShiftOfUnit } from './table.ts';
import { DBM, frequencyUnit, frequencyUnitLabel, HUNDREDTHS, type LevelScale, levelScale } from './units.ts';

/** A level column as it will be read. */
export interface LevelColumn {
  column: ColumnRole;
  scale: LevelScale;
  /** As shown with the trace. */
  unitInFile: string;
  /** Places among the wanted columns. */
  place: number;
  axisPlace: number | null;
}

export interface Layout {
  scan: ScanLayout;
  shiftOf: ShiftOfUnit[];
  levels: LevelColumn[];
  columns: ColumnRole[];
  hasAxis: boolean;
  problems: ReaderProblem[];
}

const SHIFTS = new Map([
  [1, 0],
  [1e3, 3],
  [1e6, 6],
  [1e9, 9],
  [1e12, 12],
]);

const HIGHEST_PLAUSIBLE_HZ = 1.1e13;

const shiftOfFactor = (factor: number) => SHIFTS.get(factor) ?? 0;

function sampleNumbers({ sample, decimalMark }: Structure, column: number): number[] {
  return sample.flatMap((cells) => {
    const cell = parseCell(cells[column] ?? '', decimalMark);
    return cell.kind === 'number' ? [cell.value] : [];
  });
}

/** Where the preamble says the axis begins, in Hz. */
function statedRange({ settings }: PreambleSettings): { startHz: number; stopHz: number } | null {
  const { startHz, stopHz, centreHz, spanHz } = settings;
  if (startHz && stopHz) return { startHz: startHz.value, stopHz: stopHz.value };
  if (centreHz && spanHz)
    return { startHz: centreHz.value - spanHz.value / 2, stopHz: centreHz.value + spanHz.value / 2 };
  return null;
}

/**
 * The unit that puts the first number where the preamble says that the axis begins (or, descending, ends);
 * the written unit wins where it does so.
 */
function unitByRange(
  first: number,
  range: { startHz: number; stopHz: number } | null,
  written: number | null,
): number | null {
  if (!range || first === 0) return null;
  const miss = (factor: number) =>
    Math.min(Math.abs(first * factor - range.startHz), Math.abs(first * factor - range.stopHz));
  const slack = Math.max(
    0.02 * Math.abs(range.stopHz - range.startHz),
    1e-6 * Math.max(Math.abs(range.startHz), Math.abs(range.stopHz)),
  );
  if (written !== null && miss(written) <= slack) return written;
  const [nearest] = [...SHIFTS.keys()].sort((a, b) => miss(a) - miss(b));
  return miss(nearest) <= slack ? nearest : null;
}

function axisFactor(
  structure: Structure,
  column: ColumnRole,
  stated: PreambleSettings,
  header: Header | null,
  offset: boolean,
  problems: ReaderProblem[],
): number {
  const numbers = sampleNumbers(structure, column.index);
  const first = numbers[0] ?? 0;
  const line = (header?.lines[0] ?? structure.firstRow) + 1;
  const own = column.unit === '' ? null : frequencyUnit(column.unit);
  const written = own ?? frequencyUnit(stated.frequencyUnit?.text ?? '');
  const byRange = offset ? null : unitByRange(first, statedRange(stated), written);
  if (written !== null) {
    const contradicted = byRange !== null && byRange !== written;
    const readings = (factor: number) =>
      `${frequencyWords(first * factor, 6)} read as ${frequencyUnitLabel(factor)}`;
    if (contradicted) {
      problems.push(
        problem(
          'frequencyUnitContradicts',
          'caution',
          `The header says ${frequencyUnitLabel(written)}, but the first frequency, ${first}, meets the stated range only as ${frequencyUnitLabel(byRange)} (${readings(byRange)}, ${readings(written)}); read as ${frequencyUnitLabel(byRange)}.`,
          'Check the span that is shown against the analyser.',
          line,
        ),
      );
      return byRange;
    }
    if (Math.abs(first) * written > HIGHEST_PLAUSIBLE_HZ && own !== null)
      refuse(
        'frequencyUnitContradicts',
        `Line ${line} says ${frequencyUnitLabel(written)}, but the first frequency is ${first}: ${readings(written)}, ${readings(1)}.`,
        'Correct the unit in the header, or state start and stop frequency in the file, and drop it again.',
        line,
      );
    return written;
  }
  if (byRange !== null) return byRange;
  const small = numbers.every((value) => Math.abs(value) < 1e5);
  problems.push(
    problem(
      'frequencyUnitAssumed',
      small ? 'caution' : 'note',
      `The file doesn’t state the unit of its frequencies; they are read as Hz, so the first is ${frequencyWords(first, 6)}.`,
      small
        ? 'If they are kHz, MHz or GHz, write the unit into the column’s head and drop the file again.'
        : 'Check the span that is shown.',
      structure.firstRow + 1,
    ),
  );
  return 1;
}

const middle = (numbers: number[]) => [...numbers].sort((a, b) => a - b)[numbers.length >> 1] ?? 0;

function refuseContradiction(said: string, text: string, line: number): never {
  refuse(
    'levelUnitContradicts',
    `The file says ${said}, but ${text}`,
    'Correct the unit in the column’s head to what the numbers are and drop the file again.',
    line,
  );
}

/** The scale of a level column; contradictions between unit and numbers are refused or told. */
function scaleOf(
  structure: Structure,
  column: ColumnRole,
  stated: PreambleSettings,
  line: number,
  problems: ReaderProblem[],
): LevelScale | null {
  const written = levelScale(column.unit) ?? levelScale(stated.levelUnit?.text ?? '');
  const numbers = sampleNumbers(structure, column.index);
  const negative = numbers.filter((value) => value < 0).length;
  if (written?.linear && negative > numbers.length / 2)
    refuseContradiction(
      written.label,
      `most of its levels are negative (${numbers[0]} in the first row): they can’t be ${written.label}, and as dBm they would read ${numbers[0]} dBm.`,
      line,
    );
  const tiny =
    numbers.length > 2 &&
    numbers.every((value) => value >= 0 && value < 1e-2) &&
    numbers.some((value) => value > 0);
  if (tiny && (!written || !written.linear))
    refuseContradiction(
      written?.label ?? 'no level unit',
      `its levels (${numbers[0]} in the first row) look linear: as W that would be ${levelScale('W')?.toDbm(numbers[0], 50).toFixed(1)} dBm, as V at 50 Ω ${levelScale('V')?.toDbm(numbers[0], 50).toFixed(1)} dBm.`,
      line,
    );
  if (
    (written ?? DBM) === DBM &&
    numbers.length > 2 &&
    numbers.every(Number.isInteger) &&
    middle(numbers) < -400
  ) {
    problems.push(
      problem(
        'hundredths',
        'caution',
        `The levels are whole numbers about ${middle(numbers)}; they are read as hundredths of a dBm, so the first is ${numbers[0] / 100} dBm.`,
        'Check one level against the analyser’s screen.',
        structure.firstRow + 1,
      ),
    );
    return HUNDREDTHS;
  }
  return written;
}

/**
 * Decides how the rows are read: which columns, by which powers of ten, on which level scale.
 * @throws UnreadableFile where a unit contradicts the numbers or gives no absolute level
 */
export function buildLayout(
  structure: Structure,
  header: Header | null,
  roles: Roles,
  stated: PreambleSettings,
): Layout {
  const problems: ReaderProblem[] = [];
  const headerLine = (header?.lines[0] ?? structure.firstRow) + 1;
  const places = new Array<number>(structure.columns).fill(-1);
  const shifts: number[] = [];
  const shiftOf: ShiftOfUnit[] = [];
  for (const column of roles.columns) {
    if (column.role !== 'frequency') continue;
    const factor = axisFactor(structure, column, stated, header, roles.offset, problems);
    column.unit = frequencyUnitLabel(factor);
    places[column.index] = shifts.length;
    shifts.push(shiftOfFactor(factor));
    shiftOf.push((unit) => {
      const own = frequencyUnit(unit);
      return own === null ? null : shiftOfFactor(own);
    });
  }
  const hasAxis = shifts.length > 0;
  const levels: LevelColumn[] = [];
  const unusable: { column: ColumnRole; scale: LevelScale }[] = [];
  for (const column of roles.columns) {
    if (column.role !== 'level') continue;
    const scale = scaleOf(structure, column, stated, headerLine, problems);
    if (scale && scale.kind !== 'absolute') {
      unusable.push({ column, scale });
      column.role = 'ignored';
      continue;
    }
    const used = scale ?? DBM;
    if (!scale)
      problems.push(
        problem(
          'levelUnitAssumed',
          'note',
          `The file doesn’t state the unit of ${column.name === '' ? 'its levels' : `“${column.name}”`}; dBm is assumed.`,
          'If the levels are in another unit, write it into the column’s head and drop the file again.',
          headerLine,
        ),
      );
    places[column.index] = shifts.length;
    levels.push({
      column,
      scale: used,
      unitInFile: scale ? used.label : 'not stated',
      place: shifts.length,
      axisPlace: column.axis === null ? null : places[column.axis],
    });
    shifts.push(used === HUNDREDTHS ? -2 : 0);
    const ownUnit = used.label;
    shiftOf.push((unit) => (levelScale(unit)?.label === ownUnit ? (used === HUNDREDTHS ? -2 : 0) : null));
    column.unit = used.label;
  }
  const [first] = unusable;
  if (first && levels.length === 0)
    refuse(
      first.scale.kind === 'relative' ? 'relativeLevel' : 'fieldStrength',
      first.scale.kind === 'relative'
        ? `The levels are in ${first.scale.label}: relative, without an absolute level.`
        : `The levels are in ${first.scale.label}, a field strength or current, not the level at the analyser’s input.`,
      'Export the trace with its levels in dBm.',
      headerLine,
    );
  if (first)
    problems.push(
      problem(
        'columnLeftAside',
        'note',
        `The column “${first.column.name || first.scale.label}” is in ${first.scale.label} and is left aside.`,
        'Export it in dBm if it matters.',
        headerLine,
      ),
    );
  return {
    scan: {
      delimiter: structure.delimiter,
      decimalMark: structure.decimalMark,
      places,
      shifts,
      firstLine: structure.firstRow + 1,
    },
    shiftOf,
    levels,
    columns: roles.columns,
    hasAxis,
    problems,
  };
}
