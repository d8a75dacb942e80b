import { dbToPower } from './units.ts';

const MOST_POINTS = 512;
/** Below this share of the mean (0.004 dB) skirts aren't worth a line. */
const LEAST_SHARE = 0.001;

/** A signal that is left out, with its level apart from the noise. */
export interface StrongSignal {
  hz: number;
  correctedLevelDbm: number | null;
}

/**
 * Share of the mean power of the kept points that the skirts of the signals left out still carry: the response of the
 * filter at each kept point's offset times the power of each signal. Filters of one or two poles fall so slowly that no
 * guard reaches below the floor. The share is of the displayed mean, which averaging biases: a weak signal raises the log
 * of the noise as it raises its power, so times the law's mean power it is the share of the true power, to first order.
 * At most 512 kept points, evenly spread, stand for all.
 * @returns 0 where it is below 0.001.
 */
export function skirtShare(
  frequencyHz: Float64Array,
  leftOut: Uint8Array,
  signals: readonly StrongSignal[],
  filterResponseDb: (offsetHz: number) => number,
  meanPowerMw: number,
): number {
  const stride = Math.max(1, Math.floor(frequencyHz.length / MOST_POINTS));
  const powers = signals.flatMap(({ hz, correctedLevelDbm }) =>
    correctedLevelDbm === null ? [] : [{ hz, powerMw: dbToPower(correctedLevelDbm) }],
  );
  let sum = 0;
  let count = 0;
  for (let i = 0; i < frequencyHz.length; i += stride) {
    if (leftOut[i] === 1) continue;
    count += 1;
    for (const { hz, powerMw } of powers) sum += powerMw * dbToPower(filterResponseDb(frequencyHz[i] - hz));
  }
  const share = count === 0 ? 0 : sum / count / meanPowerMw;
  return share < LEAST_SHARE ? 0 : Math.min(share, 0.999);
}
