import chisquareQuantile from '@stdlib/stats-base-dists-chisquare-quantile';
import type { AveragingCheck, Hypothesis } from '../../shared/estimate.ts';
import type { Scale } from '../../shared/settings.ts';
import { adviceOn, sentenceOn, summaryOf } from './averaging-words.ts';
import type { PointLaw } from './point-law.ts';
import { relativeScatterUncertainty, type Residuals } from './scatter.ts';

/** One way in which the points could have been averaged, with the law that it gives a point. */
export interface Candidate {
  id: Hypothesis['id'];
  label: string;
  sweeps: number;
  law: PointLaw;
}

export interface AveragingCheckInput {
  residuals: Residuals;
  /** At most one candidate of each id; those whose laws are alike are given once. */
  candidates: Candidate[];
  /** The candidate that the settings declare; null: the scale isn't stated. */
  declared: Hypothesis['id'] | null;
  /** The declared scale with the number of averages that the scatter shows. */
  otherCount: Candidate | null;
  /** Averages that the scatter shows on the declared (else the log) scale. */
  seenAverages: number | null;
  /** What was averaged, in words: `20 sweeps`, `the video filter`. */
  what: string;
  /** True where nothing is averaged, so that no scale plays a part. */
  nothingAveraged: boolean;
  /** Density that a bias of the linear mean leads to; null where it can't be given. */
  densityFor: (biasDb: number) => number | null;
}

/** Beyond this distance in standard deviations a hypothesis doesn't fit: 1 in 1,000, two-sided. */
export const SIGMAS_THAT_EXCLUDE = 3.3;
/** Beyond this distance nothing saves a hypothesis, however well its shape agrees. */
const SIGMAS_THAT_SETTLE = 4.5;
/** Normal quantile for 1 in 200: how often a true declaration may be overruled. */
const OVERRULE_QUANTILE = 2.58;
/** Two laws whose scatters lie nearer than this many standard deviations can't be told apart. */
const SEPARABLE_SIGMAS = 2.5;
/** Levels nearer than this are one answer, whichever of two hypotheses is true. */
const SAME_LEVEL_DB = 0.1;
const FEWEST_INDEPENDENT_POINTS = 12;
const GOODNESS_BINS = 12;

/** Voltage averaging that nobody declares is rare next to power and log averaging (common practice): prior odds, natural log. */
const VOLTAGE_LOG_PRIOR = Math.log(0.1);

interface Weighed extends Hypothesis {
  law: PointLaw;
  logLikelihood: number;
}

/**
 * Holds the scatter of the points against each way of averaging (method, section 3). A hypothesis fits where the
 * observed standard deviation is within 3.3 of its own standard deviations; the likelihood is that of the residuals
 * about the level of each law, tempered by independent over all points.
 */
export function averagingCheck(input: AveragingCheckInput): AveragingCheck {
  const { residuals, declared } = input;
  const enough = residuals.points >= 3 && residuals.independentPoints >= FEWEST_INDEPENDENT_POINTS;
  const weighed = weigh(input, input.candidates);
  const stated = weighed.find(({ id }) => id === declared) ?? null;
  const other = input.otherCount && enough ? weigh(input, [input.otherCount])[0] : null;
  const decision = enough
    ? decide(input, weighed, stated, other)
    : { verdict: 'undetermined' as const, best: stated };
  const shown = decision.best?.id === 'otherCount' && other ? [...weighed, other] : weighed;
  const total = logSumExp(shown.map(({ logLikelihood }) => logLikelihood));
  const likelihoods = shown.map(({ law, logLikelihood, ...hypothesis }): Hypothesis => ({
    ...hypothesis,
    likelihood: Math.exp(logLikelihood - total),
    levelErrorDb: stated ? law.biasDb - stated.law.biasDb : 0,
    densityDbmPerHz: input.densityFor(law.biasDb),
  }));
  const bestLaw = decision.best?.law ?? stated?.law ?? weighed[0]?.law;
  const uncertainty = bestLaw
    ? residuals.scatterDb * relativeScatterUncertainty(bestLaw, residuals.scatterPoints)
    : null;
  const words = {
    ...input,
    verdict: decision.verdict,
    enough,
    likelihoods,
    stated: likelihoods.find(({ id }) => id === declared) ?? null,
    best: likelihoods.find(({ id }) => id === decision.best?.id) ?? null,
  };
  return {
    verdict: decision.verdict,
    fits: decision.best?.id ?? null,
    summary: summaryOf(words),
    sentence: sentenceOn(words),
    advice: adviceOn(words),
    likelihoods,
    observedScatterDb: residuals.points >= 3 ? residuals.scatterDb : null,
    observedScatterLowDb: uncertainty === null ? null : residuals.scatterDb - 1.96 * uncertainty,
    observedScatterHighDb: uncertainty === null ? null : residuals.scatterDb + 1.96 * uncertainty,
    seenAverages: input.seenAverages,
    histogram: residuals.points >= 3 ? shownHistogram(residuals) : null,
    curves: shown.filter(({ id }) => id !== 'none' || decision.best?.id === 'none').map(curveOf(residuals)),
  };
}

function weigh({ residuals, densityFor, declared }: AveragingCheckInput, candidates: Candidate[]): Weighed[] {
  return candidates.map(({ law, ...candidate }) => {
    const relative = relativeScatterUncertainty(law, residuals.scatterPoints);
    const sigmas = (residuals.scatterDb / law.scatterDb - 1) / relative;
    return {
      ...candidate,
      law,
      predictedScatterDb: law.scatterDb,
      sigmas: Math.abs(sigmas),
      likelihood: 0,
      logLikelihood:
        logLikelihood(residuals, law) +
        (candidate.id === 'voltage' && declared !== 'voltage' ? VOLTAGE_LOG_PRIOR : 0),
      fits: Math.abs(sigmas) <= SIGMAS_THAT_EXCLUDE,
      levelErrorDb: 0,
      densityDbmPerHz: densityFor(law.biasDb),
    };
  });
}

/** How many standard deviations of the observed scatter lie between what two laws predict. */
function separation({ scatterPoints }: Residuals, a: Weighed, b: Weighed): number {
  const relative = Math.max(
    relativeScatterUncertainty(a.law, scatterPoints),
    relativeScatterUncertainty(b.law, scatterPoints),
  );
  return Math.abs(Math.log(a.law.scatterDb / b.law.scatterDb)) / relative;
}

/**
 * Log-likelihood that a rival must gain over the declaration to overrule it. Between two laws d standard deviations
 * apart the gain under a true declaration is normal with mean -d²/2 and deviation d (Neyman and Pearson's test of two
 * simple hypotheses), so -d²/2 + 2.58·d is passed once in 200; it never asks for less than an even choice.
 */
function overrulingGain(separationSigmas: number): number {
  return Math.max(0, OVERRULE_QUANTILE * separationSigmas - separationSigmas ** 2 / 2);
}

interface Decision {
  verdict: AveragingCheck['verdict'];
  best: Weighed | null;
}

function decide(
  { residuals, declared, nothingAveraged }: AveragingCheckInput,
  weighed: Weighed[],
  stated: Weighed | null,
  other: Weighed | null,
): Decision {
  const fitting = weighed.filter(({ fits }) => fits).sort((a, b) => b.logLikelihood - a.logLikelihood);
  const [fittest] = fitting;
  // The likelihood knows the whole shape: a candidate just outside 3.3 sigmas can still be far likelier than one inside.
  const likeliest = weighed
    .filter(({ sigmas }) => sigmas <= SIGMAS_THAT_SETTLE)
    .sort((a, b) => b.logLikelihood - a.logLikelihood);
  const best = fittest ? (likeliest.find(({ id }) => id !== declared) ?? fittest) : undefined;
  if (declared === null)
    return { verdict: fittest || nothingAveraged ? 'undetermined' : 'none', best: fittest ?? null };
  if (stated && stated.sigmas <= SIGMAS_THAT_SETTLE) {
    const rival = likeliest.find(({ id }) => id !== stated.id && (fittest || stated.fits));
    if (!rival) {
      if (stated.fits) return { verdict: 'declared', best: stated };
    } else {
      const apart = separation(residuals, stated, rival);
      const gain = rival.logLikelihood - stated.logLikelihood;
      if (gain > overrulingGain(apart)) return { verdict: 'other', best: rival };
      const alike = apart < SEPARABLE_SIGMAS && gain > -3 && rival.id !== 'voltage';
      const levelsDiffer = Math.abs(rival.law.biasDb - stated.law.biasDb) > SAME_LEVEL_DB;
      if (stated.fits || gain < 0)
        return { verdict: alike && levelsDiffer ? 'undetermined' : 'declared', best: stated };
    }
  }
  if (best) return { verdict: 'other', best };
  if (other && shapeAgrees(residuals, other.law)) return { verdict: 'other', best: other };
  return { verdict: 'none', best: null };
}

/** Log likelihood of the residuals about the level of a law: points with a mean power of 1 on the floor, per independent point. */
function logLikelihood({ counts, fromDb, binDb, points, scatterPoints }: Residuals, law: PointLaw): number {
  let sum = 0;
  for (let bin = 0; bin < counts.length; bin += 1) {
    if (counts[bin] === 0) continue;
    const levelDb = fromDb + (bin + 0.5) * binDb + law.biasDb;
    sum += counts[bin] * Math.log(Math.max(law.densityPerDb(levelDb), 1e-6 / law.scatterDb));
  }
  return (sum * Math.min(points, scatterPoints)) / points;
}

/**
 * Whether the shape of the residuals agrees with a law: Pearson's chi-square over 12 equally probable bins, with the
 * counts scaled to independent points, at 1 in 1,000.
 */
export function shapeAgrees(residuals: Residuals, law: PointLaw): boolean {
  const edges = Array.from(
    { length: GOODNESS_BINS - 1 },
    (_, i) => 10 * Math.log10(law.quantilePower((i + 1) / GOODNESS_BINS)),
  );
  const observed = new Float64Array(GOODNESS_BINS);
  residuals.counts.forEach((count, bin) => {
    const levelDb = residuals.fromDb + (bin + 0.5) * residuals.binDb + law.biasDb;
    const above = edges.findIndex((edge) => levelDb < edge);
    observed[above === -1 ? GOODNESS_BINS - 1 : above] += count;
  });
  const expected = residuals.points / GOODNESS_BINS;
  const chiSquare =
    (observed.reduce((sum, count) => sum + (count - expected) ** 2 / expected, 0) *
      Math.min(residuals.points, residuals.independentPoints)) /
    residuals.points;
  return chiSquare < chisquareQuantile(0.999, GOODNESS_BINS - 1);
}

function logSumExp(values: number[]): number {
  const largest = Math.max(...values);
  return largest + Math.log(values.reduce((sum, value) => sum + Math.exp(value - largest), 0));
}

/** Bins for the screen, a fifth of a scatter wide; counts as shares of the points. */
function shownHistogram({ counts, fromDb, binDb, points, scatterDb }: Residuals) {
  const merged = 5;
  const edgesDb: number[] = [];
  const shares: number[] = [];
  for (let bin = 0; bin < counts.length; bin += merged) {
    let sum = 0;
    for (let i = bin; i < bin + merged; i += 1) sum += counts[i];
    const edgeDb = fromDb + bin * binDb;
    if (Math.abs(edgeDb + (merged / 2) * binDb) > 5 * scatterDb && sum === 0) continue;
    if (edgesDb.length === 0) edgesDb.push(edgeDb);
    edgesDb.push(fromDb + (bin + merged) * binDb);
    shares.push(sum / points);
  }
  return { edgesDb, counts: shares };
}

const CURVE_PLACES = 121;

function curveOf({ scatterDb }: Residuals) {
  return ({ id, label, law }: Weighed) => {
    const reach = 4.5 * Math.max(scatterDb, law.scatterDb);
    const atDb = Array.from(
      { length: CURVE_PLACES },
      (_, i) => -reach + (2 * reach * i) / (CURVE_PLACES - 1),
    );
    return { id, label, atDb, density: atDb.map((levelDb) => law.densityPerDb(levelDb + law.biasDb)) };
  };
}

/** The scale that a hypothesis works on; null: none. */
export function scaleOf(id: Hypothesis['id']): Scale | null {
  return id === 'power' || id === 'log' || id === 'voltage' ? id : null;
}
