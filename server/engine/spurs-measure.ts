import type { PointLaw } from './point-law.ts';
import type { SpurFound } from './spurs.ts';
import type { Peak } from './spurs-detect.ts';
import type { Skirt } from './spurs-guard.ts';
import { signalPower, type AveragingScale } from './spurs-level.ts';

export interface SpurSurroundings {
  powerMw: Float64Array;
  frequencyHz: Float64Array;
  floorPower: Float64Array;
  law: Pick<PointLaw, 'meanPower'>;
  scale: AveragingScale;
  filterWidthHz: number;
  spacingHz: number;
  skirt: Skirt;
}

/**
 * Frequency, level and width of a spur.
 *
 * The peak is the vertex of a parabola in dB through the points within 0.35 filter widths (at least three), where points
 * are dense enough for one; the highest point itself where they aren't, or where it stands more than 3 dB above the
 * parabola (an impulse). The width is taken 6 dB below the peak (3 dB where the spur stands out less than 15 dB) and
 * stated as a -3 dB width by the filter's own ratio.
 */
export function measureSpur(peak: Peak, around: SpurSurroundings): SpurFound {
  const { powerMw, frequencyHz, floorPower, law, scale, filterWidthHz, spacingHz, skirt } = around;
  const top = vertex(peak.index, around);
  const floorMw = floorPower[peak.index];
  const levelMw = 10 ** (top.levelDbm / 10);
  const correctedMw = signalPower(levelMw, floorMw / law.meanPower, scale);
  const excessDb = top.levelDbm - 10 * Math.log10(floorMw);

  const dropDb = excessDb >= 15 ? 6 : 3;
  const limit = powerMw[peak.index] / 10 ** (dropDb / 10);
  const left = crossing(peak.index, -1, limit, around);
  const right = crossing(peak.index, 1, limit, around);
  const expectedHz = skirt.widthHz(dropDb);
  const measuredHz = right - left;
  let widthClass: SpurFound['widthClass'] = 'filter';
  if (measuredHz > 1.5 * expectedHz + 1.5 * spacingHz) widthClass = 'wider';
  else if (measuredHz < 0.5 * expectedHz && spacingHz < 0.25 * filterWidthHz) widthClass = 'narrower';
  return {
    hz: top.hz,
    index: peak.index,
    levelDbm: top.levelDbm,
    correctedLevelDbm: correctedMw === null ? null : 10 * Math.log10(correctedMw),
    excessDb,
    widthHz: measuredHz * (skirt.widthHz(3) / expectedHz),
    widthClass,
    fromHz: frequencyHz[peak.from],
    toHz: frequencyHz[peak.to],
    fromIndex: peak.from,
    toIndex: peak.to,
    points: peak.to - peak.from + 1,
  };
}

function vertex(index: number, around: SpurSurroundings): { hz: number; levelDbm: number } {
  const { powerMw, frequencyHz, filterWidthHz, spacingHz } = around;
  const highest = { hz: frequencyHz[index], levelDbm: 10 * Math.log10(powerMw[index]) };
  const half = Math.min(60, Math.max(1, Math.floor((0.35 * filterWidthHz) / spacingHz)));
  if (spacingHz > 0.8 * filterWidthHz || index - half < 0 || index + half >= powerMw.length) return highest;
  const scaleHz = (frequencyHz[index + half] - frequencyHz[index - half]) / 2;
  let s2 = 0;
  let s4 = 0;
  let y0 = 0;
  let y1 = 0;
  let y2 = 0;
  const count = 2 * half + 1;
  for (let place = index - half; place <= index + half; place++) {
    if (!(powerMw[place] > 0)) return highest;
    const u = (frequencyHz[place] - frequencyHz[index]) / scaleHz;
    const levelDb = 10 * Math.log10(powerMw[place]) - highest.levelDbm;
    s2 += u * u;
    s4 += u ** 4;
    y0 += levelDb;
    y1 += u * levelDb;
    y2 += u * u * levelDb;
  }
  const curvature = (count * y2 - s2 * y0) / (count * s4 - s2 * s2);
  const slope = y1 / s2;
  const offset = (y0 - curvature * s2) / count;
  if (!(curvature < 0)) return highest;
  const u = -slope / (2 * curvature);
  const riseDb = offset - (slope * slope) / (4 * curvature);
  if (Math.abs(u) > 1 || riseDb < -3 || riseDb > 3) return highest;
  return { hz: highest.hz + u * scaleHz, levelDbm: highest.levelDbm + riseDb };
}

/** Frequency at which the power falls below a limit on one side, between points linear in dB. */
function crossing(index: number, step: -1 | 1, limit: number, around: SpurSurroundings): number {
  const { powerMw, frequencyHz } = around;
  let place = index;
  while (place + step >= 0 && place + step < powerMw.length && powerMw[place] >= limit) place += step;
  if (powerMw[place] >= limit) return frequencyHz[place];
  const inner = Math.log(powerMw[place - step] / limit);
  const outer = Math.log(limit / Math.max(powerMw[place], limit * 1e-6));
  return (
    frequencyHz[place - step] + (inner / (inner + outer)) * (frequencyHz[place] - frequencyHz[place - step])
  );
}
