import type { LedgerLine } from '../../../../shared/estimate.ts';
import { percents } from '../../../lib/format.ts';

export interface LedgerRow {
  line: LedgerLine;
  letter: string;
  /** Value and running balance as shown, both rounded to the ledger's decimals. */
  shownDb: number;
  runningDb: number;
  /** Share of U² in whole percent; null where the line carries none. */
  percent: number | null;
}

const DECIMALS = 2;
const rounded = (db: number) => Number(db.toFixed(DECIMALS));

/** The lines of a ledger as they are shown, and what rounding leaves between their sum and the shown total. */
export function ledgerRows(ledger: LedgerLine[]): {
  rows: LedgerRow[];
  roundingDb: number;
  totalDb: number | null;
} {
  const lines = ledger.filter(({ kind }) => kind !== 'total');
  const total = ledger.find(({ kind }) => kind === 'total');
  const shares = percents(lines.map(({ share }) => share));
  let runningDb = 0;
  const rows = lines.map((line, index) => {
    const shownDb = rounded(line.valueDb);
    runningDb = rounded(runningDb + shownDb);
    return { line, letter: String.fromCharCode(65 + index), shownDb, runningDb, percent: shares[index] };
  });
  const totalDb = total ? rounded(total.valueDb) : null;
  return { rows, totalDb, roundingDb: totalDb === null ? 0 : rounded(totalDb - runningDb) };
}
