import type { NoiseRequest, NoiseSource } from './resolution-filter.ts';

/** Standard deviation in time of the impulse response, times RBW: half power at half an RBW from the centre. */
const IMPULSE_DEVIATION = Math.sqrt(Math.log(2)) / Math.PI;
/** Standard deviations of the impulse response that are kept on each side. */
const REACH = 4.5;

/** Amplitude response of a Gaussian filter, one half of the power at half an RBW. */
export function gaussianAmplitude(offsetInRbw: number): number {
  return Math.pow(2, -2 * offsetInRbw * offsetInRbw);
}

/** Noise through a Gaussian FIR filter of unit gain at its centre; noise that no output needs isn't drawn. */
export function gaussianNoise({ random, stepInRbw, stride }: NoiseRequest): NoiseSource {
  const half = Math.max(1, Math.ceil((REACH * IMPULSE_DEVIATION) / stepInRbw));
  const taps = 2 * half + 1;
  const weights = new Float64Array(taps);
  let gain = 0;
  for (let i = 0; i < taps; i++) {
    const time = ((i - half) * stepInRbw) / IMPULSE_DEVIATION;
    weights[i] = Math.exp((-time * time) / 2);
    gain += weights[i];
  }
  for (let i = 0; i < taps; i++) weights[i] /= gain;

  const deviation = Math.sqrt(1 / stepInRbw / 2);
  const kept = Math.max(0, taps - stride);
  const skipped = Math.min(taps, stride);
  let noiseRe = new Float64Array(0);
  let noiseIm = new Float64Array(0);
  const tailRe = new Float64Array(kept);
  const tailIm = new Float64Array(kept);
  let started = false;

  return (re, im, count) => {
    const length = kept + skipped * count;
    if (noiseRe.length < length) {
      noiseRe = new Float64Array(length);
      noiseIm = new Float64Array(length);
    }
    if (!started) {
      random.fillNormal(tailRe, 0, kept, deviation);
      random.fillNormal(tailIm, 0, kept, deviation);
      started = true;
    }
    noiseRe.set(tailRe);
    noiseIm.set(tailIm);
    random.fillNormal(noiseRe, kept, length, deviation);
    random.fillNormal(noiseIm, kept, length, deviation);
    for (let k = 0, base = 0; k < count; k++, base += skipped) {
      let sumRe = 0;
      let sumIm = 0;
      for (let j = 0; j < taps; j++) {
        const weight = weights[j];
        sumRe += weight * noiseRe[base + j];
        sumIm += weight * noiseIm[base + j];
      }
      re[k] = sumRe;
      im[k] = sumIm;
    }
    tailRe.set(noiseRe.subarray(length - kept, length));
    tailIm.set(noiseIm.subarray(length - kept, length));
  };
}
