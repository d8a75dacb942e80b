import { z } from 'zod';
import { Settings, Scale } from './settings.ts';

export const Severity = z.enum(['note', 'caution', 'stop']);
export type Severity = z.infer<typeof Severity>;

/** A span that is left out of the mean. `automatic` ones stand around spurs; a released one is put back into the mean. */
export const Exclusion = z.object({
  fromHz: z.number(),
  toHz: z.number(),
  kind: z.enum(['automatic', 'person']),
  /** Automatic ones: false when a person put the points back. */
  active: z.boolean(),
  reason: z.string().optional(),
});
export type Exclusion = z.infer<typeof Exclusion>;

/** What a person decides about spans: `exclude` leaves points out, `keep` puts the automatic exclusions that it covers back. */
export const ExclusionRequest = z.object({
  fromHz: z.number(),
  toHz: z.number(),
  action: z.enum(['exclude', 'keep']).default('exclude'),
  reason: z.string().max(500).optional(),
});
export type ExclusionRequest = z.infer<typeof ExclusionRequest>;

export const EstimateOptions = z.object({
  /** Probability that a clean capture raises a false spur. */
  falseAlarm: z.number().min(1e-9).max(0.5).default(0.01),
  /** Find spurs and leave them out. */
  spurs: z.boolean().default(true),
  /** Estimate inside this band alone. */
  bandFromHz: z.number().optional(),
  bandToHz: z.number().optional(),
});
export type EstimateOptions = z.infer<typeof EstimateOptions>;

export const Spur = z.object({
  hz: z.number(),
  levelDbm: z.number(),
  /** Level with the floor's power taken out; null where nothing is left. */
  correctedLevelDbm: z.number().nullable(),
  excessDb: z.number(),
  widthHz: z.number(),
  /** Against the width of a CW signal in this filter. */
  widthClass: z.enum(['narrower', 'filter', 'wider']),
  fromHz: z.number(),
  toHz: z.number(),
  points: z.number().int(),
  leftOut: z.boolean(),
  /** Spacing of the evenly spaced family that it belongs to. */
  family: z.object({ spacingHz: z.number(), members: z.number().int() }).optional(),
});
export type Spur = z.infer<typeof Spur>;

export const LedgerLine = z.object({
  id: z.string(),
  label: z.string(),
  /** One caption line, such as `20 sweeps on the log scale`. */
  caption: z.string(),
  valueDb: z.number(),
  kind: z.enum(['reading', 'correction', 'total']),
  /** Standard uncertainty; null: not stated. */
  uncertaintyDb: z.number().nullable(),
  /** Share of the combined variance, 0 to 1; null: carries none. */
  share: z.number().nullable(),
  formula: z.string(),
  inputs: z.array(z.object({ name: z.string(), value: z.string(), origin: z.string() })),
  /** Independent check of this line, in words. */
  check: z.string().optional(),
  source: z.string(),
});
export type LedgerLine = z.infer<typeof LedgerLine>;

export const BudgetLine = z.object({
  id: z.string(),
  label: z.string(),
  type: z.enum(['A', 'B']),
  distribution: z.enum(['gamma', 'normal', 'rectangular', 'triangular', 'uShaped', 'notStated']),
  halfWidthDb: z.number().nullable(),
  standardUncertaintyDb: z.number().nullable(),
  /** null: infinite. */
  degreesOfFreedom: z.number().nullable(),
  share: z.number().nullable(),
  source: z.string(),
});
export type BudgetLine = z.infer<typeof BudgetLine>;

export const Finding = z.object({
  code: z.string(),
  severity: Severity,
  /** One bold clause, a sentence. */
  message: z.string(),
  /** How it is known, with numbers. */
  evidence: z.string(),
  /** What to do. */
  advice: z.string(),
});
export type Finding = z.infer<typeof Finding>;

/** One way in which the points could have been averaged, held against the scatter that is seen. */
export const Hypothesis = z.object({
  /** `power`, `log`, `voltage`, `none`, or `otherCount` (declared scale, the number of averages that the scatter shows). */
  id: z.enum(['power', 'log', 'voltage', 'none', 'otherCount']),
  label: z.string(),
  sweeps: z.number(),
  predictedScatterDb: z.number(),
  /** Distance of the observed scatter from the prediction in standard deviations. */
  sigmas: z.number(),
  /** Posterior share over the hypotheses, 0 to 1. */
  likelihood: z.number(),
  fits: z.boolean(),
  /** What the density would be wrong by if the trace were evaluated as declared while this is true; dB. */
  levelErrorDb: z.number(),
  /** What the density would be under this hypothesis; null where unknown. */
  densityDbmPerHz: z.number().nullable(),
});
export type Hypothesis = z.infer<typeof Hypothesis>;

export const AveragingCheck = z.object({
  /** declared: fits what is declared; other: fits another averaging; none: fits none; undetermined: can't tell. */
  verdict: z.enum(['declared', 'other', 'none', 'undetermined']),
  /** The hypothesis that fits best, or null. */
  fits: Hypothesis.shape.id.nullable(),
  /** Some words for a table cell: `fits log, 20` or `power stated, fits log`. */
  summary: z.string(),
  sentence: z.string(),
  advice: z.string(),
  likelihoods: z.array(Hypothesis),
  observedScatterDb: z.number().nullable(),
  observedScatterLowDb: z.number().nullable(),
  observedScatterHighDb: z.number().nullable(),
  /** Averages that the scatter shows on the declared (else the best) scale. */
  seenAverages: z.number().nullable(),
  /** Residuals in dB about the mean level: bin edges (count + 1) and the share of points in each. */
  histogram: z.object({ edgesDb: z.array(z.number()), counts: z.array(z.number()) }).nullable(),
  /** Predicted probability density per dB of the residual, one curve per hypothesis that matters. */
  curves: z.array(
    z.object({
      id: Hypothesis.shape.id,
      label: z.string(),
      atDb: z.array(z.number()),
      density: z.array(z.number()),
    }),
  ),
});
export type AveragingCheck = z.infer<typeof AveragingCheck>;

export const Floor = z.object({
  model: z.enum(['level', 'tilt', 'curve']),
  /** Level across the span, as displayed, at up to 256 frequencies. */
  hz: z.array(z.number()),
  levelDbm: z.array(z.number()),
  tiltDb: z.number(),
  tiltUncertaintyDb: z.number(),
  ripple: z.object({ periodHz: z.number(), depthDb: z.number(), significance: z.number() }).optional(),
});
export type Floor = z.infer<typeof Floor>;

export const Density = z.object({
  dbmPerHz: z.number(),
  /** The statistical interval alone. */
  lowDbmPerHz: z.number(),
  highDbmPerHz: z.number(),
  coverage: z.literal(0.95),
  effectivePoints: z.number(),
  standardUncertaintyDb: z.number(),
  expandedUncertaintyDb: z.number(),
  coverageFactor: z.number(),
  /** null: infinite. */
  degreesOfFreedom: z.number().nullable(),
  /** Above k·T0. */
  aboveThermalDb: z.number(),
});
export type Density = z.infer<typeof Density>;

export const EstimateState = z.enum([
  'working',
  'submitted',
  'verified',
  'returned',
  'withdrawn',
  'superseded',
]);
export type EstimateState = z.infer<typeof EstimateState>;

/** What the engine computes: everything that follows from the trace, the settings and the exclusions alone. */
export const EngineEstimate = z.object({
  engineVersion: z.string(),
  input: z.object({
    sha256: z.string(),
    traceIndex: z.number().int(),
    points: z.number().int(),
    usedPoints: z.number().int(),
    firstHz: z.number(),
    lastHz: z.number(),
    spacingHz: z.number(),
    unit: z.enum(['dBm', 'dBm/Hz']),
  }),
  settings: Settings,
  chain: z.object({
    scale: Scale.nullable(),
    sweeps: z.number().nullable(),
    /** Independent values behind one point, all places together; null: can't be said from what is stated. */
    effectiveAverages: z.number().nullable(),
    /** Bias of the linear mean, dB. */
    biasDb: z.number(),
    noiseBandwidthHz: z.number().nullable(),
    predictedScatterDb: z.number().nullable(),
    observedScatterDb: z.number().nullable(),
  }),
  averagingCheck: AveragingCheck,
  exclusions: z.array(Exclusion),
  spurs: z.array(Spur),
  floor: Floor,
  ledger: z.array(LedgerLine),
  /** null where no density can be given; a stop finding says why. */
  density: Density.nullable(),
  /** The density under each averaging that fits, where the answer depends on what isn't known. */
  alternatives: z.array(
    z.object({
      label: z.string(),
      when: z.string(),
      dbmPerHz: z.number(),
      lowDbmPerHz: z.number(),
      highDbmPerHz: z.number(),
    }),
  ),
  budget: z.array(BudgetLine),
  /** Settings without which no single density can be given, such as `rbwHz` or `averagingScale`. */
  missingSettings: z.array(z.string()),
  findings: z.array(Finding),
});
export type EngineEstimate = z.infer<typeof EngineEstimate>;

/** An estimate as the API answers it. A what-if (`keep=false`) has no id, number or author. */
export const Estimate = EngineEstimate.extend({
  id: z.uuid().nullable(),
  captureId: z.uuid(),
  number: z.number().int().nullable(),
  state: EstimateState.nullable(),
  /** What changed against the estimate before, in words. */
  change: z.string().nullable(),
  createdAt: z.iso.datetime().nullable(),
  createdBy: z.string().nullable(),
});
export type Estimate = z.infer<typeof Estimate>;

/** A row of the history of estimates and of the captures table. */
export const EstimateSummary = z.object({
  id: z.uuid(),
  number: z.number().int(),
  state: EstimateState,
  change: z.string(),
  createdAt: z.iso.datetime(),
  createdBy: z.string(),
  verdict: AveragingCheck.shape.verdict,
  verdictSummary: z.string(),
  dbmPerHz: z.number().nullable(),
  lowDbmPerHz: z.number().nullable(),
  highDbmPerHz: z.number().nullable(),
  expandedUncertaintyDb: z.number().nullable(),
  spurs: z.number().int(),
  stops: z.number().int(),
  cautions: z.number().int(),
});
export type EstimateSummary = z.infer<typeof EstimateSummary>;

/** Body of `POST /api/captures/{id}/estimates`. Settings here are changes on top of the capture's own. */
export const EstimateRequest = z.strictObject({
  traceIndex: z.number().int().min(0).default(0),
  settings: z.record(z.string(), z.unknown()).optional(),
  exclusions: z.array(ExclusionRequest).max(1000).default([]),
  options: EstimateOptions.partial().optional(),
});
export type EstimateRequest = z.infer<typeof EstimateRequest>;
