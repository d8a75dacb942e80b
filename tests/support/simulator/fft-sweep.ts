import FFT from 'fft.js';
import type { Band } from './band.ts';
import type { Random } from './random.ts';
import { fromScale, toScale } from './scales.ts';
import type { CaptureSpec, FftMode } from './spec.ts';
import { windowOf } from './windows.ts';

/**
 * Returns a function that makes one sweep of an analyser that transforms blocks: the power shown at each
 * point, in mW. A block of white noise is windowed and transformed; the window is as long as its -3 dB
 * width asks, so points may stand closer than a bin or further apart. Blocks are independent.
 */
export function fftSweeps(spec: CaptureSpec, mode: FftMode, band: Band, random: Random): () => Float64Array {
  const { points, startHz, rbwHz } = spec;
  const size = 2 ** Math.ceil(Math.log2(points * 1.2));
  const rateHz = size * band.spacingHz;
  const taps = windowOf(mode.window, rateHz / rbwHz);
  const offset = Math.floor((size - points) / 2);
  const fft = new FFT(size);
  const block: number[] = fft.createComplexArray();
  const spectrum: number[] = fft.createComplexArray();
  const deviation = Math.sqrt(rateHz / rbwHz / 2);
  const signal = (spec.spurs ?? []).map((spur) => ({
    peak: Math.sqrt(Math.pow(10, spur.levelDbm / 10)),
    turn: (2 * Math.PI * (spur.hz - startHz + offset * band.spacingHz)) / rateHz,
  }));
  const shown = new Float64Array(points);
  const noiseRe = new Float64Array(points);
  const noiseIm = new Float64Array(points);
  const blocks = mode.blocks ?? 1;
  const scale = spec.detectorScale ?? 'power';

  const transform = (sample: (i: number) => [number, number], re: Float64Array, im: Float64Array) => {
    block.fill(0);
    for (let i = 0; i < taps.length; i++) {
      const [x, y] = sample(i);
      const slot = 2 * (i % size);
      block[slot] += taps[i] * x;
      block[slot + 1] += taps[i] * y;
    }
    fft.transform(spectrum, block);
    for (let k = 0; k < points; k++) {
      re[k] = spectrum[2 * (k + offset)];
      im[k] = spectrum[2 * (k + offset) + 1];
    }
  };

  const signalRe = new Float64Array(points);
  const signalIm = new Float64Array(points);
  return () => {
    shown.fill(0);
    for (let b = 0; b < blocks; b++) {
      transform(() => [random.normal() * deviation, random.normal() * deviation], noiseRe, noiseIm);
      if (signal.length > 0) {
        const phases = signal.map(() => 2 * Math.PI * random.uniform());
        transform(
          (i) => {
            let x = 0;
            let y = 0;
            signal.forEach(({ peak, turn }, s) => {
              x += peak * Math.cos(turn * i + phases[s]);
              y += peak * Math.sin(turn * i + phases[s]);
            });
            return [x, y];
          },
          signalRe,
          signalIm,
        );
      }
      for (let k = 0; k < points; k++) {
        const gain = Math.sqrt(band.noiseMwPerRbw[k]);
        const x = gain * noiseRe[k] + signalRe[k];
        const y = gain * noiseIm[k] + signalIm[k];
        const value = x * x + y * y;
        shown[k] += blocks === 1 ? value : toScale(scale, value) / blocks;
      }
    }
    if (blocks > 1) for (let k = 0; k < points; k++) shown[k] = fromScale(scale, shown[k]);
    return shown;
  };
}
