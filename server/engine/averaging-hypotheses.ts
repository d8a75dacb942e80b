import { plural } from '../../shared/quantities.ts';
import type { Scale } from '../../shared/settings.ts';
import { averagingCheck, SIGMAS_THAT_EXCLUDE, type Candidate } from './averaging-check.ts';
import { chainOf, type Chain, type ChainSettings } from './chain.ts';
import { pointLaw, type PointLaw, type Stage } from './point-law.ts';
import { peakValuesSeen } from './peak-values.ts';
import { detectorValuesSeen, relativeScatterUncertainty, sweepsSeen, type Residuals } from './scatter.ts';

/** A peak detector's number of values is itself taken from the scatter, so the scatter can't speak for or against it. */
const PEAK_VERDICT = {
  verdict: 'undetermined',
  fits: null,
  summary: 'peak detector',
  sentence: 'A peak detector keeps extremes; its scatter can’t tell how the trace was averaged.',
  advice: 'Repeat the capture with the sample or the average (RMS) detector.',
} as const;

const SCALES: Scale[] = ['power', 'log', 'voltage'];

/** A chain whose open numbers are filled in from the scatter. */
export interface ResolvedChain {
  chain: Chain;
  law: PointLaw;
  settings: ChainSettings;
  /** Number of sweeps taken from the scatter, with the reason; absent: as stated. */
  sweepsFromScatter?: { sweeps: number; reason: string };
  /** Values per point of an averaging detector, taken from the scatter; absent: from the dwell time. */
  detectorFromScatter?: number;
}

const lawOn = (settings: ChainSettings, scale: Scale) => pointLaw(chainOf(settings, scale).stages);

/**
 * Fills in what the settings leave open about a chain on one scale: sweeps and, for an averaging detector without a
 * sweep time, the values per point. Both are the numbers that show the observed scatter.
 */
export function resolveChain(
  settings: ChainSettings,
  scale: Scale,
  residuals: Residuals | null,
): ResolvedChain {
  let resolved = settings;
  let sweepsFromScatter: ResolvedChain['sweepsFromScatter'];
  if (settings.sweeps === undefined) {
    const single: ChainSettings = { ...settings, sweeps: 1 };
    const law = lawOn(single, scale);
    const isSingle =
      residuals === null ||
      residuals.scatterDb >
        law.scatterDb * (1 - SIGMAS_THAT_EXCLUDE * relativeScatterUncertainty(law, residuals.scatterPoints));
    const sweeps = isSingle ? 1 : sweepsSeen(chainOf(single, scale).stages, scale, residuals.scatterDb);
    const reason = isSingle ? 'the scatter is that of a single sweep' : 'the number that shows this scatter';
    resolved = { ...settings, sweeps };
    sweepsFromScatter = { sweeps, reason };
  }
  const chain = chainOf(resolved, scale);
  const peak = residuals === null ? null : peakValuesSeen(chain, residuals);
  if (peak) return { ...peak, settings: resolved, ...(sweepsFromScatter ? { sweepsFromScatter } : {}) };
  const openDetector =
    settings.detector === 'average' &&
    settings.sweepTimeS === undefined &&
    residuals !== null &&
    !sweepsFromScatter;
  if (!openDetector) {
    return {
      chain,
      law: pointLaw(chain.stages),
      settings: resolved,
      ...(sweepsFromScatter ? { sweepsFromScatter } : {}),
    };
  }
  const after = chain.stages.filter(({ place }) => place === 'sweeps' && chain.stages.length > 1);
  const detectorScale = settings.detectorScale ?? 'power';
  const joined = after.length === 0 && (resolved.sweeps ?? 1) > 1;
  const seen = detectorValuesSeen(detectorScale, after, residuals.scatterDb);
  const values = joined ? Math.max(seen, resolved.sweeps ?? 1) : seen;
  const stages: Stage[] = [{ place: 'detector', scale: detectorScale, values }, ...after];
  return {
    chain: { ...chain, stages },
    law: pointLaw(stages),
    settings: resolved,
    detectorFromScatter: values,
  };
}

/** What is averaged, in words for a sentence. */
function averagedWords({ sweeps, detector, vbwHz, noiseBandwidthHz }: ChainSettings): string {
  if ((sweeps ?? 1) > 1) return plural(sweeps ?? 1, 'sweep');
  if (vbwHz !== undefined && noiseBandwidthHz !== null && vbwHz < 3 * noiseBandwidthHz)
    return 'the video filter';
  return detector === 'average' ? 'the dwell time' : 'one sweep';
}

/** Leaves one of the candidates whose laws are alike, the declared one where it is among them. */
function distinct(candidates: Candidate[], declared: Scale | null): Candidate[] {
  const first = [...candidates].sort((a, b) => Number(b.id === declared) - Number(a.id === declared));
  return first.filter(({ law }, index) => first.findIndex((other) => other.law === law) === index);
}

/**
 * The averaging check of a trace: every scale with the stated number of sweeps, no averaging at all, and the stated
 * scale with the number that the scatter shows.
 * @param declared the resolved chain on the stated scale; null: the scale isn't stated.
 */
export function checkAveraging(
  settings: ChainSettings,
  declared: ResolvedChain | null,
  residuals: Residuals,
  densityFor: (biasDb: number) => number | null,
) {
  const scale = settings.averagingScale ?? null;
  const candidates: Candidate[] = SCALES.map((id) => {
    const resolved = id === scale && declared ? declared : resolveChain(settings, id, residuals);
    const sweeps = resolved.settings.sweeps ?? 1;
    return {
      id,
      label: sweeps > 1 ? `${id}, ${plural(Number(sweeps.toPrecision(3)), 'sweep')}` : id,
      sweeps,
      law: resolved.law,
    };
  });
  const single = { id: 'none' as const, label: 'none', sweeps: 1, law: pointLaw([]) };
  const kept = distinct(candidates, scale);
  const nothingAveraged = kept.every(({ law }) => law === single.law);
  const peak = settings.detector !== 'sample' && settings.detector !== 'average';
  const all =
    nothingAveraged || peak || kept.some(({ law }) => law === single.law) ? kept : [...kept, single];
  const countScale = scale ?? 'log';
  const before = chainOf({ ...settings, sweeps: 1 }, countScale).stages;
  const seenAverages = sweepsSeen(before, countScale, residuals.scatterDb);
  const countStage: Stage = {
    place: 'sweeps',
    scale: countScale,
    values: Number(seenAverages.toPrecision(3)),
  };
  const check = averagingCheck({
    residuals,
    candidates: all,
    declared: scale ?? (nothingAveraged ? (kept[0]?.id ?? null) : null),
    otherCount:
      scale === null || peak
        ? null
        : {
            id: 'otherCount',
            label: `${countScale}, ${plural(Number(seenAverages.toPrecision(3)), 'average')}`,
            sweeps: seenAverages,
            law: pointLaw([...before, countStage]),
          },
    seenAverages,
    what: averagedWords(declared?.settings ?? settings),
    nothingAveraged,
    densityFor,
  });
  return peak ? { ...check, ...PEAK_VERDICT } : check;
}
