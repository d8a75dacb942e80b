import { describe, expect, it } from 'vitest';
import { boundedPart, combineBudget, statedPart, type BudgetPart } from '../../server/engine/budget.ts';

const typeA = (id: string, standardUncertaintyDb: number, degreesOfFreedom: number | null): BudgetPart => ({
  id,
  label: id,
  type: 'A',
  distribution: 'normal',
  halfWidthDb: null,
  standardUncertaintyDb,
  degreesOfFreedom,
  source: 'test',
});

describe('combining a budget', () => {
  it('gives the combined uncertainty and degrees of freedom of the end-gauge example (JCGM 100:2008, H.1)', () => {
    const budget = combineBudget([
      typeA('standard', 25, 18),
      typeA('difference', 9.7, 25.6),
      typeA('expansion', 2.9, 50),
      typeA('temperature', 16.6, 2),
    ]);
    expect(budget.standardUncertaintyDb).toBeCloseTo(31.67, 1);
    expect(Math.abs((budget.degreesOfFreedom ?? 0) - 16.7)).toBeLessThan(0.1);
  });

  it('expands with Student’s factor at 95 % (NIST TN 1297, table B.1: 2.12 at 16 degrees of freedom)', () => {
    const budget = combineBudget([typeA('only', 1, 16)]);
    expect(budget.coverageFactor).toBeCloseTo(2.12, 2);
    expect(budget.expandedUncertaintyDb).toBeCloseTo(2.12, 2);
  });

  it('uses the normal factor where no part has limited degrees of freedom', () => {
    const budget = combineBudget([typeA('only', 0.5, null)]);
    expect(budget.degreesOfFreedom).toBeNull();
    expect(budget.coverageFactor).toBeCloseTo(1.96, 3);
  });

  it('turns half widths into standard uncertainties (JCGM 100:2008, 4.3; H.1: 2e-6 rectangular is 1.2e-6, 0.5 U-shaped is 0.35)', () => {
    const part = { id: 'x', label: 'x', source: 'test' };
    expect(boundedPart(part, 'rectangular', 2).standardUncertaintyDb).toBeCloseTo(1.1547, 4);
    expect(boundedPart(part, 'uShaped', 0.5).standardUncertaintyDb).toBeCloseTo(0.35355, 5);
    expect(boundedPart(part, 'triangular', 1).standardUncertaintyDb).toBeCloseTo(1 / Math.sqrt(6), 12);
  });

  it('keeps what isn’t stated as a line without a share instead of a silent zero', () => {
    const budget = combineBudget([
      typeA('a', 0.3, null),
      statedPart({ id: 'level', label: 'level', source: 'test' }, undefined),
    ]);
    expect(budget.lines[1]).toMatchObject({
      distribution: 'notStated',
      standardUncertaintyDb: null,
      share: null,
    });
    expect(budget.lines[0]?.share).toBe(1);
  });

  it('shares out the whole variance', () => {
    const budget = combineBudget([typeA('a', 0.3, 12), typeA('b', 0.4, null)]);
    expect(budget.lines.map(({ share }) => share)).toEqual([
      expect.closeTo(0.36, 10),
      expect.closeTo(0.64, 10),
    ]);
  });
});
