import type { EngineEstimate, ExclusionRequest } from '../../shared/estimate.ts';
import { EstimateOptions } from '../../shared/estimate.ts';
import { fixed } from '../../shared/quantities.ts';
import type { Scale, SettingName, Settings } from '../../shared/settings.ts';
import { checkAveraging, resolveChain, type ResolvedChain } from './averaging-hypotheses.ts';
import { combineBudget } from './budget.ts';
import { budgetParts } from './budget-parts.ts';
import { chainOf, type ChainSettings } from './chain.ts';
import { densityWalk, type DensityWalk } from './density-walk.ts';
import { effectiveSettings, type EffectiveSettings } from './effective-settings.ts';
import { findings } from './findings.ts';
import { closeLedger, type LedgerEntry } from './ledger.ts';
import {
  bandwidthEntry,
  biasEntry,
  gainEntry,
  levelEntry,
  meanEntry,
  openBiasEntry,
  ownNoiseEntry,
  skirtEntry,
} from './ledger-entries.ts';
import { noiseBandwidthRatio, threeDbWidthHz } from './noise-bandwidth.ts';
import { pointLaw, type PointLaw } from './point-law.ts';
import { quantizationStepDb } from './scatter.ts';
import { surveyTrace, type Survey } from './survey.ts';
import { dbToPower, dbToPowers } from './units.ts';
import { ENGINE_VERSION } from './version.ts';

/** One trace: levels in dB at ascending frequencies. */
export interface Trace {
  frequencyHz: Float64Array;
  level: Float64Array;
  unit: 'dBm' | 'dBm/Hz';
}

export interface EstimateInput {
  trace: Trace;
  /** SHA-256 of the file that the trace came from; goes into the estimate unchanged. */
  sha256: string;
  traceIndex: number;
  settings: Settings;
  exclusions: ExclusionRequest[];
  options?: Partial<EstimateOptions>;
}

/**
 * The whole method: from a trace and its settings to a noise density with interval, ledger, budget, averaging check,
 * spurs and findings. Pure and deterministic: the same input gives the same digits.
 * @throws RangeError where the trace is empty or its arrays differ in length.
 */
export function estimateDensity(input: EstimateInput): EngineEstimate {
  const { trace } = input;
  const { frequencyHz, level, unit } = trace;
  if (frequencyHz.length === 0 || frequencyHz.length !== level.length) {
    throw new RangeError('A trace needs as many levels as frequencies, and at least one.');
  }
  const options = EstimateOptions.parse(input.options ?? {});
  const effective = effectiveSettings(input.settings, unit);
  const axis = axisOf(frequencyHz);
  const bandwidth = bandwidthOf(effective);
  const chainSettings = chainSettingsOf(effective, bandwidth?.noiseBandwidthHz ?? null, frequencyHz.length);
  const step = quantizationStepDb(level);
  const powerMw = dbToPowers(level);
  const { values } = effective;
  const shape = values.filterShape ?? 'gaussian';
  const scale = values.averagingScale ?? 'power';
  const stated = chainOf(chainSettings);
  const search = {
    powerMw,
    frequencyHz,
    spacingHz: axis.spacingHz,
    uniform: axis.uniform,
    filterShape: shape,
    filterWidthHz: bandwidth
      ? threeDbWidthHz(shape, bandwidth.noiseBandwidthHz)
      : Math.max(axis.spacingHz, 1e-9),
    sweepTimeS: values.sweepTimeS,
    vbwHz: values.vbwHz,
    videoSmoothed: stated.stages.some(({ place }) => place === 'video'),
    declaredLaw: stated.unknown.length === 0 && stated.scale !== null ? pointLaw(stated.stages) : null,
    scale,
    exclusions: input.exclusions,
    options,
    quantizationStepDb: step,
  };
  const first = surveyTrace(search);
  const fittingLaw = first && lawAgainstDeclaration(chainSettings, first);
  const survey = fittingLaw ? surveyTrace({ ...search, declaredLaw: fittingLaw }) : first;
  const head = {
    engineVersion: ENGINE_VERSION,
    input: {
      sha256: input.sha256,
      traceIndex: input.traceIndex,
      points: frequencyHz.length,
      usedPoints: survey?.usedPoints ?? 0,
      firstHz: frequencyHz[0],
      lastHz: frequencyHz[frequencyHz.length - 1],
      spacingHz: axis.spacingHz,
      unit,
    },
  };
  if (survey === null) return { ...head, ...nothingLeft(effective, input.exclusions, axis, unit) };
  return {
    ...head,
    ...walk({ effective, unit, axis, bandwidth, chainSettings, survey, step, levelDb: level }),
  };
}

interface Axis {
  spacingHz: number;
  spanHz: number;
  uniform: boolean;
}

function axisOf(frequencyHz: Float64Array): Axis {
  const last = frequencyHz.length - 1;
  const spanHz = frequencyHz[last] - frequencyHz[0];
  const spacingHz = last > 0 ? spanHz / last : 0;
  let uniform = true;
  for (let i = 1; i < last && uniform; i += 1) {
    uniform = Math.abs(frequencyHz[i] - (frequencyHz[0] + i * spacingHz)) <= 0.51 * spacingHz;
  }
  return { spacingHz, spanHz, uniform };
}

interface Bandwidth {
  rbwHz: number;
  ratio: number;
  noiseBandwidthHz: number;
}

function bandwidthOf({ values }: EffectiveSettings): Bandwidth | null {
  if (values.rbwHz === undefined) return null;
  const ratio =
    values.bandwidthRatio ?? noiseBandwidthRatio(values.filterShape ?? 'gaussian', values.rbwKind ?? '3dB');
  return { rbwHz: values.rbwHz, ratio, noiseBandwidthHz: ratio * values.rbwHz };
}

function chainSettingsOf(
  { values }: EffectiveSettings,
  noiseBandwidthHz: number | null,
  points: number,
): ChainSettings {
  const { detectorScale, averagingScale, sweeps, vbwHz, sweepTimeS } = values;
  return {
    detector: values.detector ?? 'sample',
    filterShape: values.filterShape ?? 'gaussian',
    noiseBandwidthHz,
    points,
    ...(detectorScale === undefined ? {} : { detectorScale }),
    ...(averagingScale === undefined ? {} : { averagingScale }),
    ...(sweeps === undefined ? {} : { sweeps }),
    ...(vbwHz === undefined ? {} : { vbwHz }),
    ...(sweepTimeS === undefined ? {} : { sweepTimeS }),
  };
}

interface WalkInput {
  effective: EffectiveSettings;
  unit: 'dBm' | 'dBm/Hz';
  axis: Axis;
  bandwidth: Bandwidth | null;
  chainSettings: ChainSettings;
  survey: Survey;
  step: number | null;
  levelDb: Float64Array;
}

/** Everything after the survey: chain, check, corrections, budget, findings. */
function walk(given: WalkInput): Omit<EngineEstimate, 'engineVersion' | 'input'> {
  const { unit, axis, bandwidth, chainSettings, survey } = given;
  const statedScale = chainSettings.averagingScale ?? null;
  const resolved = resolveChain(chainSettings, statedScale ?? 'power', survey.residuals);
  const scaleMatters =
    statedScale === null && resolveChain(chainSettings, 'log', survey.residuals).law !== resolved.law;
  const effective = withFindingsOfScatter(given.effective, resolved, scaleMatters);
  const missing: SettingName[] = [
    ...(unit === 'dBm' && bandwidth === null ? (['rbwHz'] as const) : []),
    ...(scaleMatters ? (['averagingScale'] as const) : []),
  ];
  const walkFor = (chain: ResolvedChain): DensityWalk =>
    densityWalk({
      effective,
      survey,
      law: chain.law,
      biasUncertaintyDb: chain.chain.biasUncertaintyDb,
      noiseBandwidthHz: unit === 'dBm/Hz' ? 1 : (bandwidth?.noiseBandwidthHz ?? 1),
    });
  const main = walkFor(resolved);
  const canWalk = !missing.includes('rbwHz');
  const check = checkAveraging(
    chainSettings,
    statedScale === null && scaleMatters ? null : resolved,
    survey.residuals,
    (biasDb) => (canWalk ? main.dbmPerHz - (biasDb - resolved.law.biasDb) : null),
  );

  const budget = combineBudget(
    budgetParts(effective, survey, main, unit, given.step, resolved.chain.biasUncertaintyDb),
  );
  const entries: LedgerEntry[] = [
    meanEntry({
      levelDbm: main.meanLevelDbm,
      usedPoints: survey.usedPoints,
      spursLeftOut: survey.spurs.filter(({ leftOut }) => leftOut).length,
      effectivePoints: survey.independent.effectivePoints,
      unit,
    }),
    ...(main.skirtCorrectionDb === 0 ? [] : [skirtEntry(effective, main.skirtCorrectionDb)]),
    scaleMatters
      ? openBiasEntry()
      : biasEntry(effective, {
          correctionDb: main.biasCorrectionDb,
          stages: resolved.chain.stages,
          sweeps: resolved.settings.sweeps ?? null,
          check: check.sentence,
        }),
    ...(unit === 'dBm' && bandwidth ? [bandwidthEntry(effective, bandwidth)] : []),
    ...(main.ownNoise ? [ownNoiseEntry(effective, main.ownNoise)] : []),
    levelEntry(effective),
    ...(effective.values.externalGainDb === undefined
      ? []
      : [gainEntry(effective, effective.values.externalGainDb)]),
  ];
  const hidden = main.ownNoiseMarginDb !== null && main.ownNoiseMarginDb < 3;
  const density =
    missing.length > 0 || hidden
      ? null
      : {
          dbmPerHz: main.dbmPerHz,
          lowDbmPerHz: main.lowDbmPerHz,
          highDbmPerHz: main.highDbmPerHz,
          coverage: 0.95 as const,
          effectivePoints: survey.independent.effectivePoints,
          standardUncertaintyDb: budget.standardUncertaintyDb,
          expandedUncertaintyDb: budget.expandedUncertaintyDb,
          coverageFactor: budget.coverageFactor,
          degreesOfFreedom: budget.degreesOfFreedom,
          aboveThermalDb: main.aboveThermalDb,
        };
  const ledger = closeLedger(entries, budget);
  return {
    settings: effective.settings,
    chain: {
      scale: scaleMatters ? null : (statedScale ?? 'power'),
      sweeps: resolved.settings.sweeps ?? null,
      effectiveAverages: scaleMatters ? null : 1 / resolved.law.relativeVariance,
      biasDb: resolved.law.biasDb,
      noiseBandwidthHz: bandwidth?.noiseBandwidthHz ?? null,
      predictedScatterDb: scaleMatters ? null : resolved.law.scatterDb,
      observedScatterDb: check.observedScatterDb,
    },
    averagingCheck: check,
    exclusions: survey.exclusions,
    spurs: survey.spurs,
    floor: survey.floor,
    ledger: density === null ? ledger.filter(({ kind }) => kind !== 'total') : ledger,
    density,
    alternatives:
      canWalk && scaleMatters ? alternatives(chainSettings, survey, check.likelihoods, walkFor) : [],
    budget: budget.lines,
    missingSettings: missing,
    findings: findings({
      effective,
      unit,
      usedPoints: survey.usedPoints,
      spacingHz: axis.spacingHz,
      spanHz: axis.spanHz,
      uniform: axis.uniform,
      check,
      missing,
      density,
      budget,
      spurs: survey.spurs,
      spurPowerShare: survey.spurPowerShare,
      skirtShare: 1 - dbToPower(main.skirtCorrectionDb),
      floor: survey.floor,
      quantizationStepDb: given.step,
      bottomShare: bottomShare(given.levelDb),
      ownNoiseMarginDb: main.ownNoiseMarginDb,
    }),
  };
}

/**
 * The law that the scatter fits where it contradicts the declared averaging: spurs are searched again with it, since a
 * law that is too narrow takes noise for spurs. null: the declaration stands, or nothing fits.
 */
function lawAgainstDeclaration(chainSettings: ChainSettings, { residuals }: Survey): PointLaw | null {
  const { averagingScale } = chainSettings;
  if (averagingScale === undefined) return null;
  const declared = resolveChain(chainSettings, averagingScale, residuals);
  const { verdict, fits } = checkAveraging(chainSettings, declared, residuals, () => null);
  if (verdict !== 'other' || fits === null || fits === 'otherCount') return null;
  return fits === 'none' ? pointLaw([]) : resolveChain(chainSettings, fits, residuals).law;
}

/** Puts what was taken from the scatter among the settings, marked as assumed. */
function withFindingsOfScatter(
  effective: EffectiveSettings,
  resolved: ResolvedChain,
  scaleMatters: boolean,
): EffectiveSettings {
  const taken = resolved.sweepsFromScatter;
  if (!taken || scaleMatters) return effective;
  return {
    ...effective,
    settings: {
      ...effective.settings,
      sweeps: { value: taken.sweeps, origin: { kind: 'assumed', reason: taken.reason } },
    },
    values: { ...effective.values, sweeps: taken.sweeps },
  };
}

/** The density under each scale that fits, where the scale isn't stated; under every scale where none fits. */
function alternatives(
  chainSettings: ChainSettings,
  survey: Survey,
  hypotheses: EngineEstimate['averagingCheck']['likelihoods'],
  walkFor: (chain: ResolvedChain) => DensityWalk,
): EngineEstimate['alternatives'] {
  const scales: Scale[] = ['power', 'log', 'voltage'];
  const fitting = scales.filter((scale) => hypotheses.some(({ id, fits }) => id === scale && fits));
  return (fitting.length > 0 ? fitting : scales).map((scale) => {
    const { dbmPerHz, lowDbmPerHz, highDbmPerHz } = walkFor(
      resolveChain(chainSettings, scale, survey.residuals),
    );
    const predicted = hypotheses.find(({ id }) => id === scale)?.predictedScatterDb;
    const when =
      predicted === undefined
        ? `averaged on the ${scale} scale`
        : `averaged on the ${scale} scale, which predicts ${fixed(predicted, 2)} dB of scatter`;
    return { label: scale, when, dbmPerHz, lowDbmPerHz, highDbmPerHz };
  });
}

/** Share of the points that stand at the lowest level, where more than one does. */
function bottomShare(levelDb: Float64Array): number {
  let lowest = Infinity;
  let count = 0;
  for (let i = 0; i < levelDb.length; i += 1) {
    if (levelDb[i] < lowest) {
      lowest = levelDb[i];
      count = 1;
    } else if (levelDb[i] === lowest) count += 1;
  }
  return count > 1 ? count / levelDb.length : 0;
}

/** The estimate where every point is left out: it says so and gives no density. */
function nothingLeft(
  effective: EffectiveSettings,
  requests: ExclusionRequest[],
  axis: Axis,
  unit: 'dBm' | 'dBm/Hz',
): Omit<EngineEstimate, 'engineVersion' | 'input'> {
  const check: EngineEstimate['averagingCheck'] = {
    verdict: 'undetermined',
    fits: null,
    summary: 'no points left',
    sentence: 'Every point is left out, so there is nothing to check.',
    advice: 'Put some of the spans back.',
    likelihoods: [],
    observedScatterDb: null,
    observedScatterLowDb: null,
    observedScatterHighDb: null,
    seenAverages: null,
    histogram: null,
    curves: [],
  };
  const floor: EngineEstimate['floor'] = {
    model: 'level',
    hz: [],
    levelDbm: [],
    tiltDb: 0,
    tiltUncertaintyDb: 0,
  };
  const budget = combineBudget([]);
  return {
    settings: effective.settings,
    chain: {
      scale: effective.values.averagingScale ?? null,
      sweeps: effective.values.sweeps ?? null,
      effectiveAverages: null,
      biasDb: 0,
      noiseBandwidthHz: null,
      predictedScatterDb: null,
      observedScatterDb: null,
    },
    averagingCheck: check,
    exclusions: requests.flatMap(({ fromHz, toHz, action }) =>
      action === 'exclude' ? [{ fromHz, toHz, kind: 'person' as const, active: true }] : [],
    ),
    spurs: [],
    floor,
    ledger: [],
    density: null,
    alternatives: [],
    budget: [],
    missingSettings: [],
    findings: findings({
      effective,
      unit,
      usedPoints: 0,
      spacingHz: axis.spacingHz,
      spanHz: axis.spanHz,
      uniform: axis.uniform,
      check,
      missing: [],
      density: null,
      budget,
      spurs: [],
      spurPowerShare: 0,
      skirtShare: 0,
      floor,
      quantizationStepDb: null,
      bottomShare: 0,
      ownNoiseMarginDb: null,
    }).filter(({ code }) => code === 'no-points'),
  };
}
