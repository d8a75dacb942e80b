/** Legendre series up to the second degree on -1 to 1. */
export interface PolynomialFit {
  coefficients: number[];
  /** Covariance of the coefficients. */
  covariance: number[][];
  degree: number;
}

/** Value of a Legendre series of degree 0 to 2 at u: c0 + c1·u + c2·(3u² - 1)/2. */
export function legendre(coefficients: readonly number[], u: number): number {
  let sum = coefficients[0];
  if (coefficients.length > 1) sum += coefficients[1] * u;
  if (coefficients.length > 2) sum += coefficients[2] * 0.5 * (3 * u * u - 1);
  return sum;
}

export function legendreBasis(u: number, degree: number): number[] {
  return [1, u, 0.5 * (3 * u * u - 1)].slice(0, degree + 1);
}

/**
 * Weighted least squares of a Legendre series; the degree (0, 1, 2) is the highest whose last coefficient stands more
 * than three standard deviations off zero, unless it is given.
 *
 * @param at places on -1 to 1
 * @param values one per place
 * @param deviations standard deviation of each value
 * @param robust true: values far off (more than 2.5 deviations) lose weight, after Huber
 */
export function fitPolynomial(
  at: readonly number[],
  values: readonly number[],
  deviations: readonly number[],
  robust: boolean,
  degree?: number,
): PolynomialFit {
  const highest = Math.min(degree ?? 2, at.length - 1);
  for (let tried = highest; tried > 0; tried--) {
    const fit = fitDegree(at, values, deviations, robust, tried);
    const last = fit.coefficients[tried];
    if (degree !== undefined || last * last > 9 * fit.covariance[tried][tried]) return fit;
  }
  return fitDegree(at, values, deviations, robust, 0);
}

function fitDegree(
  at: readonly number[],
  values: readonly number[],
  deviations: readonly number[],
  robust: boolean,
  degree: number,
): PolynomialFit {
  const weights = deviations.map((deviation) => 1 / (deviation * deviation));
  let fit = solve(at, values, weights, degree);
  for (let round = 0; robust && round < 8; round++) {
    const eased = weights.map((weight, index) => {
      const sigmas = Math.abs(values[index] - legendre(fit.coefficients, at[index])) / deviations[index];
      return sigmas > 2.5 ? (weight * 2.5) / sigmas : weight;
    });
    fit = solve(at, values, eased, degree);
  }
  return fit;
}

function solve(
  at: readonly number[],
  values: readonly number[],
  weights: readonly number[],
  degree: number,
): PolynomialFit {
  const size = degree + 1;
  const normal = Array.from({ length: size }, () => new Array<number>(size).fill(0));
  const right = new Array<number>(size).fill(0);
  at.forEach((place, index) => {
    const basis = legendreBasis(place, degree);
    for (let row = 0; row < size; row++) {
      right[row] += weights[index] * basis[row] * values[index];
      for (let column = 0; column < size; column++) {
        normal[row][column] += weights[index] * basis[row] * basis[column];
      }
    }
  });
  const covariance = invert(normal);
  return { coefficients: multiply(covariance, right), covariance, degree };
}

export function multiply(matrix: readonly (readonly number[])[], vector: readonly number[]): number[] {
  return matrix.map((row) => row.reduce((sum, entry, column) => sum + entry * vector[column], 0));
}

/** Inverse of a small symmetric positive matrix, by Gauss and Jordan. */
export function invert(matrix: readonly (readonly number[])[]): number[][] {
  const size = matrix.length;
  const rows = matrix.map((row, index) => [
    ...row,
    ...Array.from({ length: size }, (_, column) => (column === index ? 1 : 0)),
  ]);
  for (let pivot = 0; pivot < size; pivot++) {
    const scale = rows[pivot][pivot];
    for (let column = 0; column < 2 * size; column++) rows[pivot][column] /= scale;
    for (let row = 0; row < size; row++) {
      if (row === pivot) continue;
      const factor = rows[row][pivot];
      for (let column = 0; column < 2 * size; column++) rows[row][column] -= factor * rows[pivot][column];
    }
  }
  return rows.map((row) => row.slice(size));
}
