import { effectiveIndependentPoints } from './correlation.ts';
import { robustFloor } from './floor.ts';
import type { PointLaw } from './point-law.ts';
import { detect, type Detection } from './spurs-detect.ts';
import { findFamilies } from './spurs-families.ts';
import { tabulateSkirt } from './spurs-guard.ts';
import { type AveragingScale } from './spurs-level.ts';
import { measureSpur } from './spurs-measure.ts';
import { thresholdFactor, thresholds, videoTailFactor } from './spurs-threshold.ts';

const DB_PER_NEPER = 10 / Math.LN10;
/** An oversampled envelope crosses a high level up to this many times as often as its independent values. */
const CROSSINGS_PER_INDEPENDENT = 4;
const PASSES = 5;

export interface SpurSearch {
  /** Linear power per point. */
  powerMw: Float64Array;
  /** Rising, same length. */
  frequencyHz: Float64Array;
  /** Law of one displayed point. */
  law: PointLaw;
  /** Scale on which the chain averages, for the level of a CW signal in noise. */
  scale: AveragingScale;
  /** Response of the resolution filter at an offset from its centre, dB, 0 at the centre. */
  filterResponseDb: (offsetHz: number) => number;
  /** -3 dB width of the filter. */
  filterWidthHz: number;
  spacingHz: number;
  /** Probability that a capture of noise alone raises a spur. */
  falseAlarm: number;
  /** 1 where a person left a point out: neither searched nor used. */
  excluded?: Uint8Array;
  /** Independent points in the capture, where known; else taken from the data. */
  independentPoints?: number;
  /** True where a one-pole video filter does part of the averaging: its law has the longer tail. */
  videoSmoothed?: boolean;
  /** Step to which the file rounds levels. */
  roundingDb?: number;
}

export interface SpurFound {
  hz: number;
  /** Index of the highest point. */
  index: number;
  levelDbm: number;
  correctedLevelDbm: number | null;
  excessDb: number;
  widthHz: number;
  widthClass: 'narrower' | 'filter' | 'wider';
  /** Span left out around it. */
  fromHz: number;
  toHz: number;
  fromIndex: number;
  toIndex: number;
  points: number;
  family?: { spacingHz: number; members: number };
}

export interface SpursFound {
  /** By rising frequency. */
  spurs: SpurFound[];
  /** 1 where a point belongs to a spur or its guard. */
  mask: Uint8Array;
  /** The floor on which the last pass rests. */
  floorPower: Float64Array;
  /** Points above this power count as spurs. */
  thresholdPower: Float64Array;
  /** Independent points among those searched. */
  independentPoints: number;
  /** What leaving out chance exceedances does to the mean of noise alone, dB (negative, tiny). */
  truncationBiasDb: number;
}

/**
 * Finds spurs and the points to leave out of the mean.
 *
 * Threshold per point: p = 1 - (1 - α)^(1/M) from the law of a point, M the values that can exceed it independently of
 * each other, the floor estimated from so many cells. The first pass takes the floor from the lower fifth, later ones
 * from the median of what is left, each deciding every point anew, until nothing changes.
 *
 * @throws RangeError where no point is left to search
 */
export function findSpurs(search: SpurSearch): SpursFound {
  const { powerMw, frequencyHz, law, spacingHz, filterWidthHz } = search;
  const length = powerMw.length;
  const skirt = tabulateSkirt(search.filterResponseDb, filterWidthHz);
  const person = search.excluded ?? new Uint8Array(length);
  const searched = length - person.reduce((sum, flag) => sum + flag, 0);

  let independentFraction =
    search.independentPoints === undefined
      ? undefined
      : Math.min(1, search.independentPoints / Math.max(1, searched));
  let left = person;
  let found: Detection | null = null;
  let floor = robustFloor(powerMw, frequencyHz, {
    law,
    spacingHz,
    filterWidthHz,
    excluded: person,
    quantile: 0.2,
    independentFraction,
  });
  let thresholdPower: Float64Array = new Float64Array(0);
  let probability = 0;
  const known = new Map<string, number>();
  for (let pass = 0; pass < PASSES; pass++) {
    if (pass > 0) {
      floor = robustFloor(powerMw, frequencyHz, {
        law,
        spacingHz,
        filterWidthHz,
        excluded: left,
        quantile: 0.5,
        independentFraction,
      });
    }
    const crossings = Math.min(
      searched,
      CROSSINGS_PER_INDEPENDENT * Math.max(1, searched * (independentFraction ?? 1)),
    );
    probability = -Math.expm1(Math.log1p(-search.falseAlarm) / crossings);
    const tail = search.videoSmoothed === true ? videoTailFactor(law.relativeVariance, probability) : 1;
    const rounding = 10 ** ((search.roundingDb ?? 0) / 2 / 10);
    const chance = probability;
    thresholdPower = thresholds(floor.floorPower, frequencyHz, floor.cellsAt, (cells) => {
      const key = `${chance.toPrecision(4)} ${cells.toPrecision(2)}`;
      const factor = known.get(key) ?? thresholdFactor(law, chance, Number(cells.toPrecision(2)));
      known.set(key, factor);
      return factor * tail * rounding;
    });
    const detection = detect({
      powerMw,
      frequencyHz,
      floorPower: floor.floorPower,
      thresholdPower,
      excluded: person,
      skirt,
      filterWidthHz,
      spacingHz,
    });
    const settled = found !== null && sameMask(found.mask, detection.mask);
    found = detection;
    if (settled) break;
    left = union(person, detection.mask);
    if (independentFraction === undefined) {
      independentFraction = fractionFromData(search, left);
    }
  }
  const detection = found ?? { peaks: [], mask: new Uint8Array(length) };
  const spurs = detection.peaks.map((peak) =>
    measureSpur(peak, { ...search, floorPower: floor.floorPower, skirt }),
  );
  markFamilies(spurs, search);
  const tau = 1 / (independentFraction ?? 1);
  const factor = thresholdFactor(law, probability, Infinity);
  return {
    spurs,
    mask: detection.mask,
    floorPower: floor.floorPower,
    thresholdPower,
    independentPoints: searched / tau,
    truncationBiasDb: -DB_PER_NEPER * probability * (factor - 1) * tau,
  };
}

function sameMask(one: Uint8Array, other: Uint8Array): boolean {
  for (let index = 0; index < one.length; index++) if (one[index] !== other[index]) return false;
  return true;
}

function union(one: Uint8Array, other: Uint8Array): Uint8Array {
  const both = new Uint8Array(one.length);
  for (let index = 0; index < both.length; index++) both[index] = one[index] | other[index];
  return both;
}

/** Share of independent points, from the correlation of at most 16384 points in the middle of the trace. */
function fractionFromData(search: SpurSearch, left: Uint8Array): number {
  const { powerMw, frequencyHz, law, spacingHz, filterWidthHz } = search;
  const { floorPower } = robustFloor(powerMw, frequencyHz, {
    law,
    spacingHz,
    filterWidthHz,
    excluded: left,
    shortest: true,
  });
  const count = Math.min(powerMw.length, 16384);
  const start = (powerMw.length - count) >> 1;
  const residual = new Float64Array(count);
  const mask = left.slice(start, start + count);
  for (let index = 0; index < count; index++) {
    residual[index] = powerMw[start + index] / floorPower[start + index] - 1;
    if (!Number.isFinite(residual[index])) mask[index] = 1;
  }
  const { tau } = effectiveIndependentPoints(residual, mask, {
    spacingHz: search.spacingHz,
    filterWidthHz: search.filterWidthHz,
  });
  return 1 / tau;
}

function markFamilies(spurs: SpurFound[], search: SpurSearch): void {
  const { frequencyHz, spacingHz, filterWidthHz } = search;
  const span = frequencyHz[frequencyHz.length - 1] - frequencyHz[0];
  const tolerance = Math.max(0.6 * spacingHz, 0.1 * filterWidthHz);
  const families = findFamilies(
    spurs.map((spur) => spur.hz),
    tolerance,
    span,
  );
  for (const family of families) {
    for (const member of family.members) {
      spurs[member].family = { spacingHz: family.spacingHz, members: family.members.length };
    }
  }
}
