import type { Chain } from './chain.ts';
import { pointLaw, type PointLaw, type Stage } from './point-law.ts';
import { relativeScatterUncertainty, solveFalling, type Residuals } from './scatter.ts';

const MOST_VALUES = 1e5;

/**
 * A chain with a peak detector, its number of values taken from the scatter of the points: how many values a peak of
 * filtered noise chooses among isn't the number that its average would have. The bias carries the uncertainty of that
 * number, and half the distance to the bias that the dwell time alone would give.
 * @returns null where no stage keeps the largest or smallest value.
 */
export function peakValuesSeen(chain: Chain, residuals: Residuals): { chain: Chain; law: PointLaw } | null {
  const place = chain.stages.findIndex(({ scale }) => scale === 'largest' || scale === 'smallest');
  const stage = chain.stages[place];
  if (!stage) return null;
  const withValues = (values: number): Stage[] =>
    chain.stages.map((other, i) => (i === place ? { ...other, values } : other));
  const scatterOf = (values: number) => pointLaw(withValues(values)).scatterDb;
  const seen = (scatterDb: number) =>
    Number(solveFalling(scatterOf, scatterDb, 1, MOST_VALUES).toPrecision(3));
  const stages = withValues(seen(residuals.scatterDb));
  const law = pointLaw(stages);
  const relative = relativeScatterUncertainty(law, residuals.scatterPoints);
  const higher = pointLaw(withValues(seen(residuals.scatterDb * (1 - relative))));
  const byDwell = pointLaw(chain.stages);
  const biasUncertaintyDb = Math.hypot(higher.biasDb - law.biasDb, (byDwell.biasDb - law.biasDb) / 2);
  return {
    chain: { ...chain, stages, biasUncertaintyDb: Math.hypot(chain.biasUncertaintyDb, biasUncertaintyDb) },
    law,
  };
}
