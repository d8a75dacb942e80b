/** A seeded stream of uniform numbers: mulberry32. */
export function uniformStream(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296 + 1e-12;
  };
}

/**
 * Complex Gaussian noise of unit mean power behind a Gaussian filter, one value per point, re and im in turn.
 * Neighbouring points share the power correlation exp(-(k·spacing)²/(4σ²)), σ = width/2.355.
 *
 * @param spacingPerWidth point spacing over the filter's -3 dB width
 */
export function filteredNoise(length: number, spacingPerWidth: number, uniform: () => number): Float64Array {
  const sigma = 1 / (2 * Math.sqrt(2 * Math.LN2)) / spacingPerWidth;
  const half = Math.ceil(6 * sigma);
  const taps = Array.from({ length: 2 * half + 1 }, (_, tap) =>
    Math.exp(-((tap - half) ** 2) / (4 * sigma * sigma)),
  );
  const norm = Math.sqrt(taps.reduce((sum, tap) => sum + tap * tap, 0));
  const white = whiteNoise(length + 2 * half, uniform);
  if (half === 0 || sigma < 0.16) return white.subarray(0, 2 * length);
  const noise = new Float64Array(2 * length);
  for (let tap = 0; tap < taps.length; tap++) {
    const weight = taps[tap] / norm;
    for (let index = 0; index < 2 * length; index++) noise[index] += weight * white[index + 2 * tap];
  }
  return noise;
}

/** White complex Gaussian noise of unit mean power (Box and Muller). */
export function whiteNoise(length: number, uniform: () => number): Float64Array {
  const noise = new Float64Array(2 * length);
  for (let index = 0; index < length; index++) {
    const radius = Math.sqrt(-Math.log(uniform()));
    const angle = 2 * Math.PI * uniform();
    noise[2 * index] = radius * Math.cos(angle);
    noise[2 * index + 1] = radius * Math.sin(angle);
  }
  return noise;
}

export type Scale = 'power' | 'log' | 'voltage';

export interface Tone {
  /** Place in points, fractions allowed. */
  at: number;
  /** Power over the noise power in the filter, dB. */
  levelDb: number;
}

export interface CaptureSpec {
  length: number;
  spacingPerWidth: number;
  sweeps: number;
  scale: Scale;
  tones?: Tone[];
  /** Noise power per point, linear; 1 where absent. */
  shape?: (position: number) => number;
}

/** Linear power of each point of a capture averaged over sweeps on a scale, tones of random phase per sweep added. */
export function simulateCapture(spec: CaptureSpec, uniform: () => number): Float64Array {
  const { length, spacingPerWidth, sweeps, scale } = spec;
  const sigma = 1 / (2 * Math.sqrt(2 * Math.LN2));
  const sums = new Float64Array(length);
  const amplitude = new Float64Array(length).fill(1);
  if (spec.shape) {
    for (let index = 0; index < length; index++)
      amplitude[index] = Math.sqrt(spec.shape(index / (length - 1)));
  }
  for (let sweep = 0; sweep < sweeps; sweep++) {
    const noise = filteredNoise(length, spacingPerWidth, uniform);
    for (let index = 0; index < length; index++) {
      noise[2 * index] *= amplitude[index];
      noise[2 * index + 1] *= amplitude[index];
    }
    for (const tone of spec.tones ?? []) {
      const phase = 2 * Math.PI * uniform();
      const peak = 10 ** (tone.levelDb / 20);
      const reach = Math.ceil(12 / spacingPerWidth);
      const from = Math.max(0, Math.floor(tone.at) - reach);
      const to = Math.min(length - 1, Math.ceil(tone.at) + reach);
      for (let index = from; index <= to; index++) {
        const offset = (index - tone.at) * spacingPerWidth;
        const size = peak * Math.exp(-(offset * offset) / (4 * sigma * sigma));
        noise[2 * index] += size * Math.cos(phase);
        noise[2 * index + 1] += size * Math.sin(phase);
      }
    }
    for (let index = 0; index < length; index++) {
      const power = noise[2 * index] ** 2 + noise[2 * index + 1] ** 2;
      sums[index] += scale === 'power' ? power : scale === 'log' ? Math.log(power) : Math.sqrt(power);
    }
  }
  return sums.map((sum) => {
    const mean = sum / sweeps;
    return scale === 'power' ? mean : scale === 'log' ? Math.exp(mean) : mean * mean;
  });
}

/**
 * One slow sweep behind a resolution filter and a one-pole video filter, sampled once per point.
 *
 * @param dwellWidths dwell time of a point times the resolution filter's width
 * @param videoPerWidth video over resolution width
 */
export function simulateVideoCapture(
  length: number,
  dwellWidths: number,
  videoPerWidth: number,
  scale: Scale,
  uniform: () => number,
): Float64Array {
  const step = 0.2;
  const perPoint = Math.max(1, Math.round(dwellWidths / step));
  const lead = Math.ceil(8 / (2 * Math.PI * videoPerWidth * step));
  const total = lead + length * perPoint;
  const sigma = Math.sqrt(2 * Math.LN2) / (2 * Math.PI) / step;
  const half = Math.ceil(7 * sigma);
  const taps = Array.from({ length: 2 * half + 1 }, (_, tap) =>
    Math.exp(-((tap - half) ** 2) / (4 * sigma * sigma)),
  );
  const norm = Math.sqrt(taps.reduce((sum, tap) => sum + tap * tap, 0));
  const white = whiteNoise(total + 2 * half, uniform);
  const keep = Math.exp(-2 * Math.PI * videoPerWidth * step);
  const points = new Float64Array(length);
  let state = scale === 'log' ? -0.577 : scale === 'voltage' ? 0.886 : 1;
  for (let time = 0; time < total; time++) {
    let re = 0;
    let im = 0;
    for (let tap = 0; tap < taps.length; tap++) {
      re += taps[tap] * white[2 * (time + tap)];
      im += taps[tap] * white[2 * (time + tap) + 1];
    }
    const power = (re * re + im * im) / (norm * norm);
    const value = scale === 'power' ? power : scale === 'log' ? Math.log(power) : Math.sqrt(power);
    state = keep * state + (1 - keep) * value;
    const point = time - lead;
    if (point >= 0 && point % perPoint === perPoint - 1) {
      points[(point - perPoint + 1) / perPoint] =
        scale === 'power' ? state : scale === 'log' ? Math.exp(state) : state * state;
    }
  }
  return points;
}

/** Frequencies 1 Hz apart times the spacing from 1 MHz on. */
export function axis(length: number, spacingHz: number): Float64Array {
  return Float64Array.from({ length }, (_, index) => 1e6 + index * spacingHz);
}

/** Response of a Gaussian filter of -3 dB width `widthHz`, dB. */
export function gaussianResponseDb(widthHz: number): (offsetHz: number) => number {
  return (offsetHz) => -10 * Math.log10(2) * ((2 * offsetHz) / widthHz) ** 2;
}
