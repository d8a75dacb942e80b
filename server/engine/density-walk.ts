import type { EffectiveSettings } from './effective-settings.ts';
import { densityInterval } from './interval.ts';
import type { PointLaw } from './point-law.ts';
import type { Survey } from './survey.ts';
import { dbToPower, powerToDb, thermalDensityDbmPerHz } from './units.ts';

/** The corrections from the mean reading to the density, and the statistical interval carried through them. */
export interface DensityWalk {
  meanLevelDbm: number;
  biasCorrectionDb: number;
  /** What the skirts of spurs add to the mean, taken off; 0: nothing worth a line. */
  skirtCorrectionDb: number;
  /** Reading over the analyser's own noise, both per hertz; null: own noise not stated. */
  ownNoiseMarginDb: number | null;
  ownNoise: { correctionDb: number; marginDb: number } | null;
  dbmPerHz: number;
  lowDbmPerHz: number;
  highDbmPerHz: number;
  aboveThermalDb: number;
  /** Standard uncertainty of the mean from the scatter, referred to the density, dB. */
  statisticalDb: number;
  /** Infinity: known beforehand. */
  degreesOfFreedom: number;
  /** Change of the density per change of the reading, both in dB: above 1 where own noise is subtracted. */
  sensitivity: number;
}

export interface DensityWalkInput {
  effective: EffectiveSettings;
  survey: Survey;
  law: PointLaw;
  biasUncertaintyDb: number;
  /** 1 for a trace that is per hertz already. */
  noiseBandwidthHz: number;
}

const FEWEST_POINTS_FOR_VARIANCE = 20;
const TWO_SIDED_95 = 1.959964;

/** Standard uncertainty of the correction for skirts: half of it as a rectangular half width, for the filter's tolerance. */
export const skirtUncertaintyDb = (skirtCorrectionDb: number) =>
  Math.abs(skirtCorrectionDb) / 2 / Math.sqrt(3);

/**
 * Density = mean - bias - 10·log10(Bn) - external gain, the own noise subtracted in linear power between (method,
 * sections 4 to 7). The limits of the statistical interval take the same way; where the bias is known to some hundredths
 * of a dB only (a video filter near the RBW), that joins them in quadrature.
 */
export function densityWalk({
  effective,
  survey,
  law,
  biasUncertaintyDb,
  noiseBandwidthHz,
}: DensityWalkInput): DensityWalk {
  const { values } = effective;
  const { independent } = survey;
  const fromData = independent.effectivePoints >= FEWEST_POINTS_FOR_VARIANCE && survey.relativeVariance > 0;
  const interval = densityInterval(
    fromData ? survey.relativeVariance : law.relativeVariance,
    Math.max(1, independent.effectivePoints),
    { varianceFromData: fromData, correlationFromData: independent.source === 'data' },
  );
  const meanLevelDbm = powerToDb(survey.meanPowerMw);
  const biasCorrectionDb = Math.abs(law.biasDb) < 1e-9 ? 0 : -law.biasDb;
  const skirtCorrectionDb =
    survey.skirtShare === 0 ? 0 : powerToDb(1 - Math.min(0.999, survey.skirtShare * law.meanPower));
  const atInputDbmPerHz = meanLevelDbm + skirtCorrectionDb + biasCorrectionDb - powerToDb(noiseBandwidthHz);
  const ownDbmPerHz = values.ownNoiseDbmPerHz;
  const marginDb = ownDbmPerHz === undefined ? null : atInputDbmPerHz - ownDbmPerHz;
  const subtract = (dbmPerHz: number) =>
    ownDbmPerHz === undefined
      ? dbmPerHz
      : powerToDb(Math.max(dbToPower(dbmPerHz) - dbToPower(ownDbmPerHz), dbToPower(dbmPerHz) * 1e-6));
  const gainDb = values.externalGainDb ?? 0;
  const atDevice = (dbmPerHz: number) => subtract(dbmPerHz) - gainDb;
  const dbmPerHz = atDevice(atInputDbmPerHz);
  const model = TWO_SIDED_95 * Math.hypot(biasUncertaintyDb, skirtUncertaintyDb(skirtCorrectionDb));
  const lowDbmPerHz = atDevice(atInputDbmPerHz - Math.hypot(interval.lowFactorDb, model));
  const highDbmPerHz = atDevice(atInputDbmPerHz + Math.hypot(interval.highFactorDb, model));
  const sensitivity = marginDb === null ? 1 : 1 / Math.max(1e-6, 1 - dbToPower(-marginDb));
  return {
    meanLevelDbm,
    biasCorrectionDb,
    skirtCorrectionDb,
    ownNoiseMarginDb: marginDb,
    ownNoise:
      marginDb === null ? null : { correctionDb: subtract(atInputDbmPerHz) - atInputDbmPerHz, marginDb },
    dbmPerHz,
    lowDbmPerHz,
    highDbmPerHz,
    aboveThermalDb: dbmPerHz - thermalDensityDbmPerHz(),
    statisticalDb: sensitivity * interval.standardUncertaintyDb,
    degreesOfFreedom: interval.degreesOfFreedom,
    sensitivity,
  };
}
