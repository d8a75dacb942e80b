/** A trace for the sign-in page: simulated here, from a fixed seed, with a density that is known. */
export interface SimulatedTrace {
  frequencyHz: number[];
  levelDbm: number[];
  spurs: { hz: number; levelDbm: number; fromHz: number; toHz: number }[];
  usedPoints: number;
  /** Power mean of the used points, as displayed. */
  meanDbm: number;
  densityDbmPerHz: number;
}

export const TRUE_DENSITY_DBM_PER_HZ = -146.2;
export const RBW_HZ = 10_000;
export const SWEEPS = 20;
/** 10·lg[Γ(1 + 1/20)^20], the bias of the linear mean of 20 log averages. */
export const LOG_BIAS_DB = -2.3324;
/** Noise bandwidth of a Gaussian filter over its −3 dB width: √(π / (4 ln 2)). */
const GAUSSIAN_RATIO = Math.sqrt(Math.PI / (4 * Math.LN2));
export const BANDWIDTH_DB = -10 * Math.log10(GAUSSIAN_RATIO * RBW_HZ);

const POINTS = 1001;
const START_HZ = 69.5e6;
const STEP_HZ = 1000;
const SPURS = [
  { hz: 69.75e6, dbm: -97.2 },
  { hz: 70.0e6, dbm: -87.9 },
  { hz: 70.25e6, dbm: -98.6 },
] as const;
const GUARD_HZ = 21_000;

/** Mulberry32: the same numbers on every machine. */
function uniformSource(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Voltage response of a Gaussian filter at a distance from its centre; half power at RBW/2. */
const response = (offsetHz: number) => Math.exp((-Math.LN2 / 2) * (offsetHz / (RBW_HZ / 2)) ** 2);

/** One sweep: complex Gaussian noise behind the filter, plus three CW signals, as power in mW. */
function sweep(uniform: () => number, kernel: number[], noiseMw: number): number[] {
  const reach = (kernel.length - 1) / 2;
  const length = POINTS + 2 * reach;
  const re = new Float64Array(length);
  const im = new Float64Array(length);
  for (let i = 0; i < length; i++) {
    const radius = Math.sqrt(-Math.log(1 - uniform()));
    const angle = 2 * Math.PI * uniform();
    re[i] = radius * Math.cos(angle);
    im[i] = radius * Math.sin(angle);
  }
  const phases = SPURS.map(() => 2 * Math.PI * uniform());
  return Array.from({ length: POINTS }, (_, point) => {
    let sumRe = 0;
    let sumIm = 0;
    for (let k = 0; k < kernel.length; k++) {
      sumRe += kernel[k] * re[point + k];
      sumIm += kernel[k] * im[point + k];
    }
    sumRe *= Math.sqrt(noiseMw);
    sumIm *= Math.sqrt(noiseMw);
    SPURS.forEach(({ hz, dbm }, index) => {
      const amplitude = Math.sqrt(10 ** (dbm / 10)) * response(START_HZ + point * STEP_HZ - hz);
      sumRe += amplitude * Math.cos(phases[index]);
      sumIm += amplitude * Math.sin(phases[index]);
    });
    return sumRe * sumRe + sumIm * sumIm;
  });
}

function filterKernel(): number[] {
  const reach = Math.ceil((1.5 * RBW_HZ) / STEP_HZ);
  const taps = Array.from({ length: 2 * reach + 1 }, (_, k) => response((k - reach) * STEP_HZ));
  const energy = Math.sqrt(taps.reduce((sum, tap) => sum + tap * tap, 0));
  return taps.map((tap) => tap / energy);
}

/**
 * Simulates 20 sweeps averaged on the log scale and reads the floor off the points away from the spurs:
 * power mean − log bias − 10·lg(noise bandwidth).
 */
export function simulateTrace(seed: number): SimulatedTrace {
  const uniform = uniformSource(seed);
  const kernel = filterKernel();
  const noiseMw = 10 ** ((TRUE_DENSITY_DBM_PER_HZ - BANDWIDTH_DB) / 10);
  const levelDbm = new Array<number>(POINTS).fill(0);
  for (let n = 0; n < SWEEPS; n++) {
    sweep(uniform, kernel, noiseMw).forEach((mw, point) => {
      levelDbm[point] += (10 * Math.log10(mw)) / SWEEPS;
    });
  }
  const frequencyHz = levelDbm.map((_, point) => START_HZ + point * STEP_HZ);
  const used = levelDbm.filter((_, point) =>
    SPURS.every(({ hz }) => Math.abs(frequencyHz[point] - hz) > GUARD_HZ),
  );
  const meanMw = used.reduce((sum, dbm) => sum + 10 ** (dbm / 10), 0) / used.length;
  const meanDbm = 10 * Math.log10(meanMw);
  const spurs = SPURS.map(({ hz }) => ({
    hz,
    levelDbm: levelDbm[Math.round((hz - START_HZ) / STEP_HZ)],
    fromHz: hz - GUARD_HZ,
    toHz: hz + GUARD_HZ,
  }));
  return {
    frequencyHz,
    levelDbm,
    spurs,
    usedPoints: used.length,
    meanDbm,
    densityDbmPerHz: meanDbm - LOG_BIAS_DB + BANDWIDTH_DB,
  };
}
