import FFT from 'fft.js';
import type { NoiseRequest, NoiseSource } from './resolution-filter.ts';

/** Noise through a brick-wall filter one RBW wide: a spectrum that is white inside and nothing outside. */
export function rectangularNoise({ random, stepInRbw, stride }: NoiseRequest): NoiseSource {
  let blockRe = new Float64Array(0);
  let blockIm = new Float64Array(0);
  let next = 0;

  const refill = (count: number) => {
    const steps = count * stride + Math.ceil(16 / stepInRbw);
    const size = 2 ** Math.max(4, Math.ceil(Math.log2(steps)));
    const fft = new FFT(size);
    const spectrum: number[] = fft.createComplexArray();
    const record: number[] = fft.createComplexArray();
    const halfWidthBins = (stepInRbw * size) / 2;
    const deviation = Math.sqrt(size / stepInRbw / 2);
    for (let bin = -size / 2; bin < size / 2; bin++) {
      const from = Math.max(bin - 0.5, -halfWidthBins);
      const to = Math.min(bin + 0.5, halfWidthBins);
      const inside = Math.sqrt(Math.max(0, to - from)) * deviation;
      const slot = 2 * ((bin + size) % size);
      spectrum[slot] = inside > 0 ? random.normal() * inside : 0;
      spectrum[slot + 1] = inside > 0 ? random.normal() * inside : 0;
    }
    fft.inverseTransform(record, spectrum);
    const usable = Math.floor((size - 16 / stepInRbw) / stride);
    blockRe = Float64Array.from({ length: usable }, (_, k) => record[2 * k * stride]);
    blockIm = Float64Array.from({ length: usable }, (_, k) => record[2 * k * stride + 1]);
    next = 0;
  };

  return (re, im, count) => {
    for (let k = 0; k < count; k++) {
      if (next >= blockRe.length) refill(count);
      re[k] = blockRe[next];
      im[k] = blockIm[next];
      next++;
    }
  };
}
