import type { ReaderProblem } from '../../shared/capture.ts';
import type { Severity } from '../../shared/estimate.ts';

/** A problem of the file; `line` counts from 1. */
export function problem(
  code: string,
  severity: Severity,
  message: string,
  advice: string,
  line?: number,
): ReaderProblem {
  return { code, severity, message, advice, ...(line === undefined ? {} : { line }) };
}

/** A file that can't be read. The first problem is what stops; its message and advice are the error's message. */
export class UnreadableFile extends Error {
  readonly problems: ReaderProblem[];

  constructor(problems: ReaderProblem[]) {
    const [first] = problems;
    super(first ? `${first.message} ${first.advice}` : 'The file can’t be read.');
    this.name = 'UnreadableFile';
    this.problems = problems;
  }
}

/** Stops reading: what it is, what to export instead, at which line. */
export function refuse(code: string, message: string, advice: string, line?: number): never {
  throw new UnreadableFile([problem(code, 'stop', message, advice, line)]);
}

const MOST_ALIKE = 5;

/** At most five problems of one code; the fifth says how many more there are. */
export function condensed(problems: ReaderProblem[]): ReaderProblem[] {
  const counts = new Map<string, number>();
  for (const { code } of problems) counts.set(code, (counts.get(code) ?? 0) + 1);
  const seen = new Map<string, number>();
  return problems.flatMap((one) => {
    const number = (seen.get(one.code) ?? 0) + 1;
    seen.set(one.code, number);
    const more = (counts.get(one.code) ?? 0) - MOST_ALIKE;
    if (number > MOST_ALIKE) return [];
    return number === MOST_ALIKE && more > 0
      ? [{ ...one, message: `${one.message} (And ${more} more like this.)` }]
      : [one];
  });
}

/** `line 4`, `lines 4, 5 and 9`, `lines 4, 5, 6 and 17 more`. */
export function lineWords(lines: number[], count = lines.length): string {
  const shown = lines.slice(0, 5);
  if (count === 1) return `line ${shown[0]}`;
  if (count <= shown.length) return `lines ${shown.slice(0, -1).join(', ')} and ${shown[count - 1]}`;
  return `lines ${shown.join(', ')} and ${count - shown.length} more`;
}
