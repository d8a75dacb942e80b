import { sampleQuantile } from './floor-quantile.ts';
import { robustFloor } from './floor.ts';
import { pointLaw, type PointLaw } from './point-law.ts';
import { solveFalling } from './scatter.ts';

const LARGEST_SAMPLE = 20000;
const LOWER = 0.1;
const MIDDLE = 0.4;

/** Spread of the lower part of a law in dB: spurs only ever lift points, so it stays clear of them. */
const lowerSpreadDb = (law: Pick<PointLaw, 'quantilePower'>) =>
  10 * Math.log10(law.quantilePower(MIDDLE) / law.quantilePower(LOWER));

/**
 * The law to search spurs with: the declared one where the lower quantiles of the points bear it out, else the Gamma
 * law whose lower quantiles spread as the points do, so that a wrong declaration doesn't turn noise into spurs.
 */
export function workingLaw(
  declared: PointLaw | null,
  powerMw: Float64Array,
  frequencyHz: Float64Array,
  spacingHz: number,
  filterWidthHz: number,
): PointLaw {
  const guess = declared ?? pointLaw([]);
  const { floorPower } = robustFloor(powerMw, frequencyHz, {
    law: guess,
    spacingHz,
    filterWidthHz,
    quantile: 0.3,
  });
  const stride = Math.max(1, Math.floor(powerMw.length / LARGEST_SAMPLE));
  const ratios = new Float64Array(Math.ceil(powerMw.length / stride));
  let count = 0;
  for (let i = 0; i < powerMw.length; i += stride) {
    const ratio = powerMw[i] / floorPower[i];
    if (ratio > 0 && Number.isFinite(ratio)) {
      ratios[count] = ratio;
      count += 1;
    }
  }
  if (count < 20) return guess;
  const seenDb =
    10 * Math.log10(sampleQuantile(ratios, count, MIDDLE) / sampleQuantile(ratios, count, LOWER));
  if (!(seenDb > 0)) return guess;
  const independent = count * Math.min(1, (stride * spacingHz) / filterWidthHz);
  const tolerance = Math.max(0.12, 3 / Math.sqrt(independent));
  if (declared && Math.abs(Math.log(seenDb / lowerSpreadDb(declared))) < tolerance) return declared;
  const values = solveFalling(
    (n) => lowerSpreadDb(pointLaw([{ place: 'sweeps', scale: 'power', values: n }])),
    seenDb,
    1,
    1e6,
  );
  return pointLaw([{ place: 'sweeps', scale: 'power', values: Number(values.toPrecision(3)) }]);
}
