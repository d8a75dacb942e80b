import { describe, expect, test } from 'vitest';
import { boundedPart, combineBudget, type BudgetPart } from '../../server/engine/budget.ts';
import { densityInterval } from '../../server/engine/interval.ts';
import { checkValues, expectValue } from './check-values.ts';

const part = (standardUncertaintyDb: number, degreesOfFreedom: number): BudgetPart => ({
  id: 'part',
  label: 'Part',
  type: 'A',
  distribution: 'normal',
  halfWidthDb: null,
  standardUncertaintyDb,
  degreesOfFreedom,
  source: 'a published example',
});

describe('coverage', () => {
  test.each(checkValues(/t\.p95\.(\d+)/))('$id', ({ entry, caught: [freedom] }) => {
    expectValue(entry, combineBudget([part(1, Number(freedom))]).coverageFactor);
  });
  // The unit plays no part in the formula: these are the nanometres of the end-gauge example.
  test.each(checkValues(/gumh1\.veff/))('$id', ({ entry }) => {
    const parts = [part(25, 18), part(9.7, 25.6), part(2.9, 50), part(16.6, 2)];
    expectValue(entry, combineBudget(parts).degreesOfFreedom ?? NaN);
  });
  test.each(checkValues(/typeB\.(.*)/))('$id', ({ entry, caught: [name] }) => {
    const distribution = name === 'ushaped' ? 'uShaped' : name === 'triangular' ? name : 'rectangular';
    const { standardUncertaintyDb } = boundedPart({ id: 'b', label: 'B', source: '' }, distribution, 1);
    expectValue(entry, 1 / (standardUncertaintyDb ?? NaN));
  });
});

describe('95 % limits of the truth about a mean of single looks', () => {
  test.each(checkValues(/ci95\.(lo|up)\.(\d+)/))('$id', ({ entry, caught: [side, freedom] }) => {
    const { lowFactorDb, highFactorDb } = densityInterval(1, Number(freedom) / 2);
    // The package's Gamma quantile is 1.5·10⁻⁴ high at 0.975 from a shape of 1,000 on (scipy is the check): 0.0007 dB.
    const own = Number(freedom) >= 2000 ? 1e-3 : 0;
    expectValue(entry, side === 'lo' ? lowFactorDb : highFactorDb, own);
  });
  test('are wider on the upper side', () => {
    const { lowFactorDb, highFactorDb } = densityInterval(1, 10);
    expect(highFactorDb).toBeGreaterThan(-lowFactorDb);
  });
});
