import type { CaptureSpec } from './spec.ts';

const linear = (db: number) => Math.pow(10, db / 10);

/** What stands at the analyser's input, point by point. */
export interface Band {
  frequencyHz: Float64Array;
  spacingHz: number;
  /** Noise power per RBW of bandwidth, mW. */
  noiseMwPerRbw: Float64Array;
  meanDeviceDbmPerHz: number;
  meanDisplayedDbmPerHz: number;
}

/** Frequencies and noise of a capture: the density's shape, the external gain and the analyser's own noise. */
export function bandOf(spec: CaptureSpec): Band {
  const { points, startHz, stopHz } = spec;
  const spacingHz = (stopHz - startHz) / (points - 1);
  const gain = linear(spec.externalGainDb ?? 0);
  const own = spec.ownNoiseDbmPerHz === undefined ? 0 : linear(spec.ownNoiseDbmPerHz);
  const frequencyHz = new Float64Array(points);
  const noiseMwPerRbw = new Float64Array(points);
  let deviceSum = 0;
  let displayedSum = 0;
  for (let k = 0; k < points; k++) {
    const hz = startHz + k * spacingHz;
    let shapeDb = (spec.tiltDb ?? 0) * (k / (points - 1) - 0.5);
    for (const hump of spec.humps ?? []) {
      const offset = (hz - hump.centreHz) / hump.widthHz;
      shapeDb += hump.heightDb * Math.exp((-offset * offset) / 2);
    }
    const device = linear(spec.densityDbmPerHz + shapeDb);
    const displayed = device * gain + own;
    frequencyHz[k] = hz;
    noiseMwPerRbw[k] = displayed * spec.rbwHz;
    deviceSum += device;
    displayedSum += displayed;
  }
  return {
    frequencyHz,
    spacingHz,
    noiseMwPerRbw,
    meanDeviceDbmPerHz: 10 * Math.log10(deviceSum / points),
    meanDisplayedDbmPerHz: 10 * Math.log10(displayedSum / points),
  };
}
