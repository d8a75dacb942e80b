import { binomialLimits } from './binomial.ts';
import type { Cell } from './cells.ts';
import type { Summary } from './summary.ts';

const RISK = 0.001;
/** A mean error this small is none, whatever its standard error. */
const SMALL_ERROR_DB = 0.02;
/** Width over the width that the errors' own spread asks for; the spread of few captures is itself uncertain. */
const WIDEST = 1.1;

const show = (value: number | null, decimals: number, sign = false) =>
  value === null ? '-' : `${sign && value >= 0 ? '+' : ''}${value.toFixed(decimals)}`;

/** What is outside its limits, in few words; empty where nothing is. */
export function complaints(cell: Cell, summary: Summary): string[] {
  const { captures, covered, meanErrorDb, standardErrorDb } = summary;
  const given = captures - summary.withoutDensity;
  const words: string[] = [];
  if (cell.density === 'interval') {
    const { low, high } = binomialLimits(given, 0.95, RISK);
    if (summary.withoutDensity > 0) words.push(`${summary.withoutDensity} without density`);
    if (given > 0 && (covered < low || covered > high)) words.push(`coverage outside ${low}..${high}`);
    if (meanErrorDb !== null && standardErrorDb !== null) {
      if (Math.abs(meanErrorDb) > Math.max(SMALL_ERROR_DB, 3.3 * standardErrorDb)) words.push('biased');
    }
    if ((summary.widthRatio ?? 0) > WIDEST * (1 + 3.3 / Math.sqrt(2 * given))) words.push('wide');
  }
  if (cell.density === 'stopped' && summary.stopped < captures)
    words.push(`${captures - summary.stopped} not stopped`);
  const spurLimit = binomialLimits(captures, 0.01, RISK).high;
  if (summary.capturesWithFalseSpurs > spurLimit) words.push(`false spurs above ${spurLimit}`);
  if (summary.rightVerdicts < captures) words.push('verdicts');
  if (
    cell.levelErrorDb !== undefined &&
    Math.abs((summary.meanLevelErrorDb ?? 99) - cell.levelErrorDb) > 0.1
  ) {
    words.push(`level error should be ${cell.levelErrorDb}`);
  }
  if (summary.largestLedgerGapDb > 1e-9) words.push('ledger');
  return words;
}

/** The figures as a table in plain text, a line per cell, and the coverage of all cells together. */
export function summaryTable(cells: Cell[], summaries: Summary[]): string {
  const head = [
    'cell',
    'cover %',
    'mean dB',
    '± se',
    'width',
    'spread',
    'M eff',
    'right',
    'verdicts',
    'false',
    'missed',
    'ms',
    '',
  ];
  const rows = summaries.map((summary, i) => [
    summary.name,
    show(summary.coverage === null ? null : summary.coverage * 100, 1),
    show(summary.meanErrorDb, 4, true),
    show(summary.standardErrorDb, 4),
    show(summary.widthRatio, 3),
    show(summary.spreadRatio, 3),
    show(summary.meanEffectivePoints, 0),
    `${summary.rightVerdicts}/${summary.captures}`,
    Object.entries(summary.verdicts)
      .map(([verdict, count]) => `${verdict} ${count}`)
      .join(', '),
    String(summary.capturesWithFalseSpurs),
    String(summary.missedSpurs),
    show(summary.engineMs, 1),
    complaints(cells[i], summary).join('; '),
  ]);
  const widths = head.map((word, column) => Math.max(word.length, ...rows.map((row) => row[column].length)));
  const line = (row: string[]) =>
    row
      .map((word, column) => word.padEnd(widths[column]))
      .join('  ')
      .trimEnd();
  const judged = summaries.filter((_, i) => cells[i].density === 'interval');
  const given = judged.reduce((sum, { captures, withoutDensity }) => sum + captures - withoutDensity, 0);
  const covered = judged.reduce((sum, one) => sum + one.covered, 0);
  const all = given === 0 ? '-' : `${((100 * covered) / given).toFixed(2)} % of ${given}`;
  return [line(head), ...rows.map(line), '', `all intervals together cover ${all}`].join('\n');
}
