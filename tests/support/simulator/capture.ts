import { bandOf } from './band.ts';
import { fftSweeps } from './fft-sweep.ts';
import { Random } from './random.ts';
import { fromScale, toScale } from './scales.ts';
import type { CaptureSpec, SimulatedCapture } from './spec.ts';
import { sweptSweeps } from './swept.ts';

/** Simulates one capture. The same spec gives the same digits. */
export function simulateCapture(spec: CaptureSpec): SimulatedCapture {
  const band = bandOf(spec);
  const random = new Random(spec.seed);
  const { mode, points, sweeps, averagingScale } = spec;
  const sweep =
    mode.kind === 'swept' ? sweptSweeps(spec, mode, band, random) : fftSweeps(spec, mode, band, random);
  const sums = new Float64Array(points);
  const highest = new Float64Array(points);
  const lowest = new Float64Array(points).fill(Infinity);
  for (let n = 0; n < sweeps; n++) {
    const shown = sweep();
    for (let k = 0; k < points; k++) {
      sums[k] += toScale(averagingScale, shown[k]);
      if (shown[k] > highest[k]) highest[k] = shown[k];
      if (shown[k] < lowest[k]) lowest[k] = shown[k];
    }
  }
  const step = spec.roundingDb ?? 0;
  const exported = (power: number) => {
    const levelDbm = toScale('log', power);
    return step > 0 ? Math.round(levelDbm / step) * step : levelDbm;
  };
  return {
    frequencyHz: band.frequencyHz,
    levelDbm: sums.map((sum) => exported(fromScale(averagingScale, sum / sweeps))),
    maxHoldDbm: highest.map(exported),
    minHoldDbm: lowest.map(exported),
    truth: {
      densityDbmPerHz: band.meanDeviceDbmPerHz,
      displayedDensityDbmPerHz: band.meanDisplayedDbmPerHz,
      spurs: spec.spurs ?? [],
      spec,
    },
  };
}
