import Papa from 'papaparse';

/** How cells are parted; `' '` is any run of blanks and tabs. */
export type Delimiter = ',' | ';' | '\t' | '|' | ' ';

const BLANKS = /[ \t\u00a0]+/;
const QUOTED_OR_BARE = /"(?:[^"]|"")*"|[^ \t\u00a0]+/g;

function unquoted(cell: string): string {
  const text = cell.trim();
  return text.length > 1 && text.startsWith('"') && text.endsWith('"')
    ? text.slice(1, -1).replaceAll('""', '"').trim()
    : text;
}

/**
 * The cells of one line, blanks around and quotes taken off.
 * Quoted cells may hold the delimiter; a stray quote within a cell is plain text.
 */
export function splitLine(line: string, delimiter: Delimiter): string[] {
  if (delimiter === ' ') {
    const text = line.trim();
    if (text === '') return [''];
    return text.includes('"') ? (text.match(QUOTED_OR_BARE) ?? []).map(unquoted) : text.split(BLANKS);
  }
  if (!line.includes('"')) return line.split(delimiter).map((cell) => cell.trim());
  const [row] = Papa.parse<string[]>(line.trim(), { delimiter, newline: '\n' }).data;
  return (row ?? ['']).map(unquoted);
}

/** Cells without the empty ones at the end, which a delimiter at the line's end leaves. */
export function withoutEmptyTail(cells: string[]): string[] {
  let end = cells.length;
  while (end > 0 && cells[end - 1] === '') end -= 1;
  return cells.slice(0, end);
}

/** Lines of a text with LF, CRLF, CR or a mixture. */
export function splitLines(text: string): string[] {
  return text.split(/\r\n|\n|\r/);
}

const COMMENT = /^\s*(?:#+|!+|%+|\/\/+|\*+|'|REM\b|--+(?=\s*[A-Za-z]))\s?/;

/** A comment line's text without its mark, or null where the line is no comment. */
export function commentText(line: string): string | null {
  const match = COMMENT.exec(line);
  return match ? line.slice(match[0].length) : null;
}

/** True for a line of blanks, delimiters, rules and the NUL or ^Z that old programs end a file with. */
export function isBlankLine(line: string): boolean {
  return /^[\s,;|=_*#\u0000\u001a\ufeff"-]*$/.test(line);
}
