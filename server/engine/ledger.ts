import type { LedgerLine } from '../../shared/estimate.ts';
import type { Budget } from './budget.ts';

/** A line of the walk before its share of the uncertainty is known. `budgetIds` name the parts that it carries. */
export type LedgerEntry = Omit<LedgerLine, 'uncertaintyDb' | 'share' | 'kind'> & {
  kind: 'reading' | 'correction';
  budgetIds: string[];
};

/**
 * Closes the walk from the reading to the density: each line gets the uncertainty of the budget parts that it
 * carries and its share of the combined variance; the total is the sum of the lines, so that they always add up.
 */
export function closeLedger(entries: LedgerEntry[], budget: Budget): LedgerLine[] {
  const lines = entries.map(({ budgetIds, ...entry }): LedgerLine => {
    const stated = budget.lines.filter(
      ({ id, standardUncertaintyDb }) => budgetIds.includes(id) && standardUncertaintyDb !== null,
    );
    const variance = stated.reduce((sum, part) => sum + (part.standardUncertaintyDb ?? 0) ** 2, 0);
    return {
      ...entry,
      uncertaintyDb: stated.length === 0 ? null : Math.sqrt(variance),
      share: stated.length === 0 ? null : stated.reduce((sum, { share }) => sum + (share ?? 0), 0),
    };
  });
  const total = lines.reduce((sum, { valueDb }) => sum + valueDb, 0);
  return [
    ...lines,
    {
      id: 'density',
      label: 'Noise density',
      caption: 'the sum of the lines above',
      valueDb: total,
      kind: 'total',
      uncertaintyDb: budget.standardUncertaintyDb,
      share: null,
      formula: 'sum of the lines',
      inputs: [],
      source: 'JCGM 100:2008',
    },
  ];
}
