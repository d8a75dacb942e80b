import type { Estimate } from '../../../shared/estimate.ts';

const cell = (value: string | number | null): string => {
  if (value === null) return '';
  if (typeof value === 'number') return String(value);
  const line = value.replace(/[\t\r\n]+/g, ' ');
  return /^[=+\-@]/.test(line) ? `'${line}` : line;
};

/** The ledger as tab-separated text, values in full precision. */
export function ledgerTsv({ ledger }: Estimate): string {
  const head = ['line', 'what', 'valueDb', 'standardUncertaintyDb', 'shareOfVariance', 'formula', 'source'];
  const rows = ledger.map(({ id, label, valueDb, uncertaintyDb, share, formula, source }) => [
    id,
    label,
    valueDb,
    uncertaintyDb,
    share,
    formula,
    source,
  ]);
  return [head, ...rows].map((row) => row.map(cell).join('\t')).join('\r\n') + '\r\n';
}
