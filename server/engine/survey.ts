import type { EstimateOptions, Exclusion, ExclusionRequest, Floor, Spur } from '../../shared/estimate.ts';
import type { FilterShape, Scale } from '../../shared/settings.ts';
import { effectiveIndependentPoints, type IndependentPoints } from './correlation.ts';
import { applyExclusions } from './exclusions.ts';
import { filterResponseDb } from './filter-shape.ts';
import { floorShape } from './floor-shape.ts';
import type { PointLaw } from './point-law.ts';
import { findRipple } from './ripple.ts';
import { residualsOf, type Residuals } from './scatter.ts';
import { findSpurs } from './spurs.ts';
import { skirtShare } from './spur-skirts.ts';
import { meanOfKept, powerToDb } from './units.ts';
import { workingLaw } from './working-law.ts';

export interface SurveyInput {
  powerMw: Float64Array;
  /** Ascending. */
  frequencyHz: Float64Array;
  spacingHz: number;
  uniform: boolean;
  filterShape: FilterShape;
  filterWidthHz: number;
  sweepTimeS: number | undefined;
  vbwHz: number | undefined;
  /** True where a video filter averages within a sweep. */
  videoSmoothed: boolean;
  /** Law that the settings declare; null: they leave it open. */
  declaredLaw: PointLaw | null;
  scale: Scale;
  exclusions: ExclusionRequest[];
  options: EstimateOptions;
  quantizationStepDb: number | null;
}

/** What the trace itself shows: spurs, floor, mean, scatter and correlation. Nothing here depends on gain or bandwidth corrections. */
export interface Survey {
  leftOut: Uint8Array;
  usedPoints: number;
  exclusions: Exclusion[];
  spurs: Spur[];
  spurPowerShare: number;
  floor: Floor;
  /** Mean linear power of the kept points. */
  meanPowerMw: number;
  /** Variance of a point about the floor over the squared mean, from the data. */
  relativeVariance: number;
  independent: IndependentPoints;
  residuals: Residuals;
  /** Share of the mean that the skirts of spurs left out still carry, 0 to 1. */
  skirtShare: number;
  /** How much leaving out chance exceedances lowers the mean, dB (negative, tiny). */
  truncationBiasDb: number;
}

const SHOWN_FLOOR_POINTS = 256;

/** Surveys a trace; null where no point is left. */
export function surveyTrace(input: SurveyInput): Survey | null {
  const { powerMw, frequencyHz, spacingHz, filterWidthHz, options } = input;
  const band = { fromHz: options.bandFromHz, toHz: options.bandToHz };
  const person = applyExclusions(frequencyHz, [], input.exclusions, band).leftOut;
  if (!person.includes(0)) return null;
  const law = workingLaw(input.declaredLaw, powerMw, frequencyHz, spacingHz, filterWidthHz);
  const search = options.spurs
    ? findSpurs({
        powerMw,
        frequencyHz,
        law,
        scale: input.scale,
        filterResponseDb: (offsetHz) => filterResponseDb(input.filterShape, filterWidthHz, offsetHz),
        filterWidthHz,
        spacingHz,
        falseAlarm: options.falseAlarm,
        videoSmoothed: input.videoSmoothed,
        excluded: applyExclusions(frequencyHz, [], [], band).leftOut,
        roundingDb: input.quantizationStepDb ?? undefined,
      })
    : {
        spurs: [],
        truncationBiasDb: 0,
        floorPower: new Float64Array(powerMw.length).fill(meanOfKept(powerMw, person)),
      };
  const { leftOut, exclusions, spanLeftOut } = applyExclusions(
    frequencyHz,
    search.spurs,
    input.exclusions,
    band,
  );
  const usedPoints = leftOut.length - leftOut.reduce((sum, flag) => sum + flag, 0);
  if (usedPoints === 0) return null;

  const bounds = {
    spacingHz,
    filterWidthHz,
    sweepTimeS: input.sweepTimeS,
    ...(input.vbwHz === undefined || input.vbwHz > 10 * filterWidthHz ? {} : { videoWidthHz: input.vbwHz }),
  };
  const meanPowerMw = meanOfKept(powerMw, leftOut);
  const about = (fitted: Float64Array) => {
    const residual = new Float64Array(powerMw.length);
    for (let i = 0; i < powerMw.length; i += 1) residual[i] = (powerMw[i] - fitted[i]) / meanPowerMw;
    return residual;
  };
  const first = effectiveIndependentPoints(about(search.floorPower), leftOut, bounds);
  const shape = floorShape({
    powerMw,
    frequencyHz,
    mask: leftOut,
    law,
    spacingHz,
    filterWidthHz,
    tau: first.tau,
  });
  const independent = effectiveIndependentPoints(about(shape.fittedPower), leftOut, bounds);
  const ripple = input.uniform ? findRipple(powerMw, frequencyHz, leftOut, filterWidthHz) : null;
  return {
    leftOut,
    usedPoints,
    exclusions,
    spurs: search.spurs.map((spur, index) => ({
      hz: spur.hz,
      levelDbm: spur.levelDbm,
      correctedLevelDbm: spur.correctedLevelDbm,
      excessDb: spur.excessDb,
      widthHz: spur.widthHz,
      widthClass: spur.widthClass,
      fromHz: spur.fromHz,
      toHz: spur.toHz,
      points: spur.points,
      leftOut: spanLeftOut[index],
      ...(spur.family ? { family: spur.family } : {}),
    })),
    spurPowerShare: spurShare(powerMw, leftOut, meanPowerMw),
    floor: {
      model: shape.model,
      ...shownFloor(frequencyHz, shape.fittedPower),
      tiltDb: shape.tiltDb,
      tiltUncertaintyDb: shape.tiltUncertaintyDb,
      ...(ripple
        ? {
            ripple: { periodHz: ripple.periodHz, depthDb: ripple.depthDb, significance: ripple.significance },
          }
        : {}),
    },
    meanPowerMw,
    relativeVariance: varianceAbout(
      powerMw,
      shape.fittedPower,
      leftOut,
      meanPowerMw,
      shape.parameters,
      independent,
    ),
    independent,
    residuals: residualsOf(
      powerMw,
      shape.fittedPower,
      leftOut,
      independent.effectivePoints,
      shape.parameters,
      input.quantizationStepDb,
    ),
    skirtShare: skirtShare(
      frequencyHz,
      leftOut,
      search.spurs.filter((_, index) => spanLeftOut[index]),
      (offsetHz) => filterResponseDb(input.filterShape, filterWidthHz, offsetHz),
      meanPowerMw,
    ),
    truncationBiasDb: search.truncationBiasDb,
  };
}

/** Power above the mean of the noise in the points left out, over all power in the trace. */
function spurShare(powerMw: Float64Array, leftOut: Uint8Array, meanPowerMw: number): number {
  let total = 0;
  let spurs = 0;
  for (let i = 0; i < powerMw.length; i += 1) {
    total += powerMw[i];
    if (leftOut[i] === 1) spurs += Math.max(0, powerMw[i] - meanPowerMw);
  }
  return total > 0 ? spurs / total : 0;
}

function varianceAbout(
  powerMw: Float64Array,
  fittedMw: Float64Array,
  leftOut: Uint8Array,
  meanPowerMw: number,
  parameters: number,
  { points, effectivePoints }: IndependentPoints,
): number {
  let squares = 0;
  for (let i = 0; i < powerMw.length; i += 1) {
    if (leftOut[i] === 0) squares += ((powerMw[i] - fittedMw[i]) / meanPowerMw) ** 2;
  }
  const share = Math.min(0.9, parameters / Math.max(1, effectivePoints));
  const variance = squares / (points * (1 - share));
  return variance * (1 + variance / Math.max(1, effectivePoints));
}

function shownFloor(frequencyHz: Float64Array, fittedMw: Float64Array) {
  const last = frequencyHz.length - 1;
  const count = Math.min(SHOWN_FLOOR_POINTS, frequencyHz.length);
  const places = Array.from({ length: count }, (_, i) => Math.round((i * last) / Math.max(1, count - 1)));
  return { hz: places.map((i) => frequencyHz[i]), levelDbm: places.map((i) => powerToDb(fittedMw[i])) };
}
