import gamma from '@stdlib/stats-base-dists-gamma';
import trigamma from '@stdlib/math-base-special-trigamma';
import digamma from '@stdlib/math-base-special-digamma';
import type { PointLaw } from '../../../server/engine/point-law.ts';

const DB_PER_NEPER = 10 / Math.LN10;

/** Law of a mean of `looks` independent powers. */
export function gammaLaw(looks: number): PointLaw {
  return {
    meanPower: 1,
    relativeVariance: 1 / looks,
    scatterDb: DB_PER_NEPER * Math.sqrt(trigamma(looks)),
    meanDb: DB_PER_NEPER * (digamma(looks) - Math.log(looks)),
    quantilePower: (p) => gamma.quantile(p, looks, looks),
    survivalPower: (x) => 1 - gamma.cdf(x, looks, looks),
    pdfDb: (x) => {
      const power = Math.exp(x / DB_PER_NEPER);
      return (gamma.pdf(power, looks, looks) * power) / DB_PER_NEPER;
    },
  };
}

/** Law of `looks` independent values averaged on the log or voltage scale, by repeated convolution on a grid. */
export function convolvedLaw(scale: 'log' | 'voltage', looks: number): PointLaw {
  const from = scale === 'log' ? -24 : 0;
  const to = scale === 'log' ? 4 : 6;
  const cells = 7000;
  const step = (to - from) / cells;
  const single = Float64Array.from({ length: cells }, (_, cell) => {
    const y = from + (cell + 0.5) * step;
    return step * (scale === 'log' ? Math.exp(y - Math.exp(y)) : 2 * y * Math.exp(-y * y));
  });
  let sum = single;
  for (let look = 1; look < looks; look++) sum = convolve(sum, single);
  const power = (cell: number) => {
    const mean = from + ((cell + 0.5 * looks) * step) / looks;
    return scale === 'log' ? Math.exp(mean) : mean * mean;
  };
  const survival = new Float64Array(sum.length + 1);
  for (let cell = sum.length - 1; cell >= 0; cell--) survival[cell] = survival[cell + 1] + sum[cell];
  let first = 0;
  let second = 0;
  let dbFirst = 0;
  let dbSecond = 0;
  for (let cell = 0; cell < sum.length; cell++) {
    const p = power(cell);
    const db = DB_PER_NEPER * Math.log(p);
    first += sum[cell] * p;
    second += sum[cell] * p * p;
    dbFirst += sum[cell] * db;
    dbSecond += sum[cell] * db * db;
  }
  const edge = (cell: number) => power(cell - 0.5);
  const find = (x: number) => {
    const mean = scale === 'log' ? Math.log(x) : Math.sqrt(x);
    return ((mean - from) * looks) / step;
  };
  return {
    meanPower: first,
    relativeVariance: second / (first * first) - 1,
    scatterDb: Math.sqrt(dbSecond - dbFirst * dbFirst),
    meanDb: dbFirst,
    quantilePower: (p) => {
      let low = 0;
      let high = sum.length;
      while (high - low > 1) {
        const middle = (low + high) >> 1;
        if (survival[middle] > 1 - p) low = middle;
        else high = middle;
      }
      return edge(low + (survival[low] - (1 - p)) / Math.max(1e-300, survival[low] - survival[high]));
    },
    survivalPower: (x) => {
      const place = Math.min(sum.length, Math.max(0, find(x)));
      const cell = Math.floor(place);
      return survival[cell] + (place - cell) * ((survival[cell + 1] ?? 0) - survival[cell]);
    },
    pdfDb: () => Number.NaN,
  };
}

function convolve(one: Float64Array, other: Float64Array): Float64Array {
  const out = new Float64Array(one.length + other.length - 1);
  for (let i = 0; i < one.length; i++) {
    if (one[i] < 1e-18) continue;
    for (let j = 0; j < other.length; j++) out[i + j] += one[i] * other[j];
  }
  return out;
}
