/** A table of a trace export, cell by cell. */
export interface TraceTable {
  /** Lines before the table, finished. */
  preamble: string[];
  /** Lines of the header, finished. */
  header: string[];
  /** One list of cells per column. */
  columns: string[][];
  delimiter: string;
  lineEnd?: '\n' | '\r\n';
  footer?: string[];
}

/** The text of a trace export. */
export function traceText({
  preamble,
  header,
  columns,
  delimiter,
  lineEnd = '\n',
  footer = [],
}: TraceTable): string {
  const rows = columns[0].map((_, row) => columns.map((column) => column[row]).join(delimiter));
  return [...preamble, ...header, ...rows, ...footer, ''].join(lineEnd);
}

/** Numbers divided by a unit and written with fixed decimals. */
export function cells(values: Float64Array, decimals: number, unit = 1): string[] {
  return Array.from(values, (value) => (value / unit).toFixed(decimals));
}

/** The same cells with a decimal comma. */
export function withComma(texts: string[]): string[] {
  return texts.map((text) => text.replace('.', ','));
}
