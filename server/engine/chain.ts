import type { Detector, FilterShape, Scale, SettingName } from '../../shared/settings.ts';
import { valuesInTime, valuesInVideoFilter, type NoiseFilter } from './effective-values.ts';
import type { Stage } from './point-law.ts';

/** Settings that say what one displayed point is. Absent: not stated. */
export interface ChainSettings {
  detector: Detector;
  detectorScale?: Scale;
  averagingScale?: Scale;
  sweeps?: number;
  vbwHz?: number;
  sweepTimeS?: number;
  filterShape: FilterShape;
  /** null: RBW not stated. */
  noiseBandwidthHz: number | null;
  points: number;
}

/** The places where values are averaged between the filter and the screen. */
export interface Chain {
  stages: Stage[];
  /** Scale of the video filter and the sweeps; null: not stated, though something is averaged on it. */
  scale: Scale | null;
  sweeps: number | null;
  /** Settings whose absence leaves the number of averaged values open. */
  unknown: SettingName[];
  /** Half the width within which the bias of the effective-number formula is trusted, dB (see `videoBiasUncertaintyDb`). */
  biasUncertaintyDb: number;
}

/**
 * Standard uncertainty of the bias that the effective number of a one-pole video filter gives, dB. The formula matches
 * the variance; its third cumulant is off where VBW and RBW are alike. Against a simulation of one sweep it was off by
 * 0.002 dB at VBW/RBW = 0.1, 0.034 at 0.3 and 0.07 at 1 (method, section 2); this curve goes through these, over the
 * sweeps that average it away.
 */
function videoBiasUncertaintyDb(vbwOverRbw: number, sweeps: number): number {
  return (0.07 * Math.exp(-((Math.log10(vbwOverRbw) / 0.6) ** 2))) / sweeps;
}

/** Duration of one point: the sweep time over the points. */
export function dwellS(sweepTimeS: number, points: number): number {
  return sweepTimeS / points;
}

/**
 * The chain of stages behind a point (method, section 1): the detector over the dwell time, the one-pole video filter,
 * the sweeps. A video filter before a power-averaging detector works on the detector's scale (common practice), else on
 * the averaging scale. Stages that follow each other on one scale are one stage with the product of their numbers.
 * @param scale scale to try in the place of the one that is stated or missing.
 */
export function chainOf(settings: ChainSettings, scale: Scale | undefined = settings.averagingScale): Chain {
  const { detector, sweeps, vbwHz, sweepTimeS, points, noiseBandwidthHz } = settings;
  const filter: NoiseFilter | null =
    noiseBandwidthHz === null ? null : { shape: settings.filterShape, noiseBandwidthHz };
  const unknown: SettingName[] = [];
  const stages: Stage[] = [];
  const detectorScale = settings.detectorScale ?? 'power';
  const averages = detector === 'average';
  const averagingScale = scale ?? 'log';
  const videoScale = averages ? detectorScale : averagingScale;

  const narrow = filter !== null && vbwHz !== undefined && vbwHz < 30 * filter.noiseBandwidthHz;
  const videoValues = filter !== null && narrow ? valuesInVideoFilter(filter, videoScale, vbwHz) : 1;
  const dwell = sweepTimeS === undefined ? null : dwellS(sweepTimeS, points);
  if (filter === null && vbwHz !== undefined) unknown.push('rbwHz');

  if (averages) {
    const values = filter === null || dwell === null ? null : valuesInTime(filter, detectorScale, dwell);
    if (values === null) unknown.push(dwell === null ? 'sweepTimeS' : 'rbwHz');
    stages.push({ place: 'detector', scale: detectorScale, values: Math.max(values ?? 1, videoValues) });
  } else {
    if (videoValues > 1.0005) stages.push({ place: 'video', scale: videoScale, values: videoValues });
    if (detector !== 'sample') {
      const values = filter === null || dwell === null ? null : valuesInTime(filter, 'power', dwell);
      if (values === null) unknown.push(dwell === null ? 'sweepTimeS' : 'rbwHz');
      const side = detector === 'negativePeak' ? 'smallest' : 'largest';
      stages.push({ place: 'detector', scale: side, values: Math.max(1, (values ?? 1) / videoValues) });
    }
  }
  if (sweeps === undefined) unknown.push('sweeps');
  if ((sweeps ?? 1) > 1) stages.push({ place: 'sweeps', scale: averagingScale, values: sweeps ?? 1 });

  const averagedOnScale = stages.some(
    ({ place, scale: on }) => on === averagingScale && (place !== 'detector' || averages),
  );
  return {
    stages: merged(stages),
    scale: scale ?? (averagedOnScale || sweeps === undefined ? null : 'power'),
    sweeps: sweeps ?? null,
    unknown,
    biasUncertaintyDb:
      filter !== null && narrow && videoScale !== 'power'
        ? videoBiasUncertaintyDb(vbwHz / filter.noiseBandwidthHz, sweeps ?? 1)
        : 0,
  };
}

/** Joins neighbouring stages on one scale: averages of averages of equal weight are one average. */
function merged(stages: Stage[]): Stage[] {
  const joined: Stage[] = [];
  for (const stage of stages) {
    const last = joined.at(-1);
    if (last && last.scale === stage.scale && stage.scale !== 'largest' && stage.scale !== 'smallest') {
      joined[joined.length - 1] = { ...stage, values: last.values * stage.values };
    } else joined.push(stage);
  }
  return joined;
}
