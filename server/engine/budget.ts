import tQuantile from '@stdlib/stats-base-dists-t-quantile';
import type { BudgetLine } from '../../shared/estimate.ts';

/** One contribution to the uncertainty before it is combined. */
export type BudgetPart = Omit<BudgetLine, 'share'>;

export interface Budget {
  lines: BudgetLine[];
  standardUncertaintyDb: number;
  expandedUncertaintyDb: number;
  coverageFactor: number;
  /** null: infinite. */
  degreesOfFreedom: number | null;
}

/** Divisor from half width to standard uncertainty (JCGM 100, 4.3.7, 4.3.9; U-shaped: arcsine). */
const DIVISOR = { rectangular: Math.sqrt(3), triangular: Math.sqrt(6), uShaped: Math.SQRT2 } as const;

/** A type B part from its half width in dB. */
export function boundedPart(
  part: Pick<BudgetPart, 'id' | 'label' | 'source'>,
  distribution: keyof typeof DIVISOR,
  halfWidthDb: number,
): BudgetPart {
  return {
    ...part,
    type: 'B',
    distribution,
    halfWidthDb,
    standardUncertaintyDb: halfWidthDb / DIVISOR[distribution],
    degreesOfFreedom: null,
  };
}

/** A type B part stated as a standard uncertainty in dB; null: not stated, and then it's a line without a number. */
export function statedPart(
  part: Pick<BudgetPart, 'id' | 'label' | 'source'>,
  standardUncertaintyDb: number | null | undefined,
): BudgetPart {
  const stated = standardUncertaintyDb ?? null;
  return {
    ...part,
    type: 'B',
    distribution: stated === null ? 'notStated' : 'normal',
    halfWidthDb: null,
    standardUncertaintyDb: stated,
    degreesOfFreedom: null,
  };
}

/**
 * Combines the parts of a budget in dB by root sum of squares, with effective degrees of freedom by
 * Welch-Satterthwaite, ν = u⁴/Σ(uᵢ⁴/νᵢ), and expands at 95 % with Student's factor (JCGM 100, G.4).
 * Parts without a number are kept as lines and carry no share.
 */
export function combineBudget(parts: BudgetPart[]): Budget {
  const variance = parts.reduce((sum, part) => sum + (part.standardUncertaintyDb ?? 0) ** 2, 0);
  const standardUncertaintyDb = Math.sqrt(variance);
  const weighted = parts.reduce(
    (sum, { standardUncertaintyDb: u, degreesOfFreedom: nu }) =>
      u === null || nu === null ? sum : sum + u ** 4 / nu,
    0,
  );
  const degreesOfFreedom = weighted > 0 ? variance ** 2 / weighted : null;
  const coverageFactor = tQuantile(0.975, Math.max(1, degreesOfFreedom ?? 1e9));
  return {
    lines: parts.map((part) => ({
      ...part,
      share:
        part.standardUncertaintyDb === null || variance === 0
          ? null
          : part.standardUncertaintyDb ** 2 / variance,
    })),
    standardUncertaintyDb,
    expandedUncertaintyDb: coverageFactor * standardUncertaintyDb,
    coverageFactor,
    degreesOfFreedom,
  };
}
