import type { NoiseRequest, NoiseSource } from './resolution-filter.ts';

const halfWidthInRbw = (poles: number) => 0.5 / Math.sqrt(Math.pow(2, 1 / poles) - 1);

/** Amplitude response of `poles` synchronously tuned poles, one half of the power at half an RBW. */
export function polesAmplitude(poles: number, offsetInRbw: number): number {
  const offset = offsetInRbw / halfWidthInRbw(poles);
  return Math.pow(1 + offset * offset, -poles / 2);
}

/**
 * Noise through a cascade of equal one-pole filters, each fed by the one before, as a stochastic
 * differential equation that is stepped exactly: x(t + dt) = exp(A dt) x(t) + a normal vector whose
 * covariance is the integral of exp(A s) B B' exp(A' s) over the step.
 */
export function polesNoise(poles: number, { random, stepInRbw, stride }: NoiseRequest): NoiseSource {
  const rate = 2 * Math.PI * halfWidthInRbw(poles);
  const step = rate * stepInRbw * stride;
  const transition = decay(poles, step);
  const drive = cholesky(stepCovariance(poles, rate, Math.min(step, 60)));
  const start = cholesky(stepCovariance(poles, rate, 60));
  const real = draw(start, random);
  const imaginary = draw(start, random);
  let started = false;

  return (re, im, count) => {
    for (let k = 0; k < count; k++) {
      if (started) {
        advance(real, transition, drive, random);
        advance(imaginary, transition, drive, random);
      }
      started = true;
      re[k] = real[poles - 1];
      im[k] = imaginary[poles - 1];
    }
  };
}

/** First column of exp(A dt), which is a lower triangular Toeplitz matrix. */
function decay(poles: number, step: number): Float64Array {
  const column = new Float64Array(poles);
  let term = Math.exp(-step);
  for (let i = 0; i < poles; i++) {
    column[i] = term;
    term *= step / (i + 1);
  }
  return column;
}

/** Covariance that the drive adds to the stages in one step, for white noise of half a unit in each part; Simpson's rule. */
function stepCovariance(poles: number, rate: number, step: number): Float64Array[] {
  const intervals = 4000;
  const covariance = Array.from({ length: poles }, () => new Float64Array(poles));
  for (let n = 0; n <= intervals; n++) {
    const weight = n === 0 || n === intervals ? 1 : n % 2 === 1 ? 4 : 2;
    const response = decay(poles, (step * n) / intervals);
    for (let i = 0; i < poles; i++) {
      for (let j = 0; j < poles; j++) {
        covariance[i][j] += (weight * response[i] * response[j] * step * rate) / (3 * intervals) / 2;
      }
    }
  }
  return covariance;
}

function cholesky(matrix: Float64Array[]): Float64Array[] {
  const size = matrix.length;
  const root = Array.from({ length: size }, () => new Float64Array(size));
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      let rest = matrix[i][j];
      for (let k = 0; k < j; k++) rest -= root[i][k] * root[j][k];
      root[i][j] = i === j ? Math.sqrt(Math.max(0, rest)) : root[j][j] > 0 ? rest / root[j][j] : 0;
    }
  }
  return root;
}

function draw(root: Float64Array[], random: { normal(): number }): Float64Array {
  const state = new Float64Array(root.length);
  const normals = Float64Array.from(root, () => random.normal());
  for (let i = 0; i < root.length; i++) for (let j = 0; j <= i; j++) state[i] += root[i][j] * normals[j];
  return state;
}

function advance(
  state: Float64Array,
  transition: Float64Array,
  drive: Float64Array[],
  random: { normal(): number },
): void {
  const size = state.length;
  for (let i = size - 1; i >= 0; i--) {
    let value = 0;
    for (let j = 0; j <= i; j++) value += transition[i - j] * state[j];
    state[i] = value;
  }
  for (let j = 0; j < size; j++) {
    const normal = random.normal();
    for (let i = j; i < size; i++) state[i] += drive[i][j] * normal;
  }
}
