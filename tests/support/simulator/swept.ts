import type { Band } from './band.ts';
import type { Random } from './random.ts';
import { amplitudeAt, filteredNoise } from './resolution-filter.ts';
import { fromScale, toScale } from './scales.ts';
import type { CaptureSpec, SweptMode } from './spec.ts';
import { VideoFilter } from './video-filter.ts';

/** Below this many values per dwell, mean and extremes over the dwell would miss what happens between them. */
const VALUES_PER_DWELL = 8;
/** A video filter this much wider than the RBW changes nothing that shows in a capture. */
const WIDE_VIDEO = 30;
const BLOCK = 1 << 18;

/**
 * Returns a function that makes one sweep: the power shown at each point, in mW. White noise runs through
 * the filter as one stationary process in time; signals pass as phasors with the filter's response at
 * their offset; then video filter and detector. Sweeps are independent of each other.
 */
export function sweptSweeps(
  spec: CaptureSpec,
  mode: SweptMode,
  band: Band,
  random: Random,
): () => Float64Array {
  const { rbwHz, detector, points } = spec;
  const detectorScale = spec.detectorScale ?? 'power';
  const videoScale = spec.videoScale ?? spec.averagingScale;
  const videoInRbw = (spec.vbwHz ?? Infinity) / rbwHz;
  const filtered = videoInRbw < WIDE_VIDEO;
  const atInstants = detector === 'sample' && !filtered;
  const oversampling = Math.max(
    spec.oversampling ?? (atInstants ? 8 : 12),
    filtered ? Math.min(40, 6 * videoInRbw) : 0,
  );
  const smallest = detector === 'sample' ? 1 : VALUES_PER_DWELL;
  const perDwell = Math.max(smallest, Math.ceil(mode.dwellInRbw * oversampling));
  const stepInRbw = mode.dwellInRbw / perDwell;
  const stride = atInstants ? perDwell : 1;
  const perPoint = atInstants ? 1 : perDwell;
  const carried = filtered ? videoScale : 'power';
  const converts = carried !== detectorScale;
  const warmUp = filtered ? Math.ceil(1.6 / videoInRbw / stepInRbw) : 0;
  const pointsPerBlock = Math.max(1, Math.floor(BLOCK / perPoint));
  const re = new Float64Array(Math.max(warmUp, Math.min(points, pointsPerBlock) * perPoint));
  const im = new Float64Array(re.length);
  const shown = new Float64Array(points);

  return () => {
    const noise = filteredNoise(spec.filter, { random, stepInRbw, stride });
    const signals = phasors(spec, band, perPoint, stepInRbw * stride, random);
    const video = filtered ? new VideoFilter(videoInRbw, stepInRbw) : null;

    if (video) {
      noise(re, im, warmUp);
      const mw = band.noiseMwPerRbw[0];
      for (let i = 0; i < warmUp; i++) video.next(toScale(videoScale, mw * (re[i] * re[i] + im[i] * im[i])));
    }
    for (let first = 0; first < points; first += pointsPerBlock) {
      const count = Math.min(pointsPerBlock, points - first);
      noise(re, im, count * perPoint);
      for (let k = first, i = 0; k < first + count; k++) {
        const gain = Math.sqrt(band.noiseMwPerRbw[k]);
        let sum = 0;
        let high = -Infinity;
        let low = Infinity;
        let last = 0;
        for (let j = 0; j < perPoint; j++, i++) {
          const x = gain * re[i] + signals.re(k, j);
          const y = gain * im[i] + signals.im(k, j);
          const power = x * x + y * y;
          last = video ? video.next(toScale(videoScale, power)) : power;
          if (detector === 'average')
            sum += converts ? toScale(detectorScale, fromScale(carried, last)) : last;
          if (last > high) high = last;
          if (last < low) low = last;
        }
        if (detector === 'average') shown[k] = fromScale(detectorScale, sum / perPoint);
        else if (detector === 'peak') shown[k] = fromScale(carried, high);
        else shown[k] = fromScale(carried, detector === 'negativePeak' ? low : last);
      }
    }
    return shown;
  };
}

interface Phasors {
  re(point: number, step: number): number;
  im(point: number, step: number): number;
}

const NONE: Phasors = { re: () => 0, im: () => 0 };

/** The sum of the CW signals behind the filter while the sweep passes them, at every step near enough to matter. */
function phasors(spec: CaptureSpec, band: Band, perPoint: number, step: number, random: Random): Phasors {
  if (!spec.spurs || spec.spurs.length === 0) return NONE;
  const { points, rbwHz, startHz } = spec;
  const steps = points * perPoint;
  const sumRe = new Float64Array(steps);
  const sumIm = new Float64Array(steps);
  const hzPerStep = band.spacingHz / perPoint;
  for (const spur of spec.spurs) {
    const peak = Math.sqrt(Math.pow(10, spur.levelDbm / 10));
    const start = 2 * Math.PI * random.uniform();
    const tuned = (spur.hz - startHz) / hzPerStep + (perPoint - 1) / 2;
    const smallest = Math.sqrt(1e-5 * band.noiseMwPerRbw[0]);
    const reach = Math.min(steps, Math.ceil(reachInRbw(spec, peak, smallest) * (rbwHz / hzPerStep)));
    const from = Math.max(0, Math.floor(tuned - reach));
    const to = Math.min(steps - 1, Math.ceil(tuned + reach));
    for (let i = from; i <= to; i++) {
      const offset = ((i - tuned) * hzPerStep) / rbwHz;
      const amplitude = peak * amplitudeAt(spec.filter, offset);
      const phase = start + Math.PI * offset * (i - tuned) * step;
      sumRe[i] += amplitude * Math.cos(phase);
      sumIm[i] += amplitude * Math.sin(phase);
    }
  }
  return { re: (k, j) => sumRe[k * perPoint + j], im: (k, j) => sumIm[k * perPoint + j] };
}

function reachInRbw(spec: CaptureSpec, peak: number, smallest: number): number {
  let reach = 0.5;
  while (reach < 1e4 && peak * amplitudeAt(spec.filter, reach) > smallest) reach *= 1.25;
  return reach;
}
