/** Legendre series on -1 to 1. */
export interface PolynomialFit {
  coefficients: number[];
  /** Covariance of the coefficients. */
  covariance: number[][];
  degree: number;
}

/** What a further term of the series must take off chi-square to be worth having. */
const WORTH_OF_A_TERM = 5;

/** Value of a Legendre series at u, -1 to 1: c0 + c1·u + c2·(3u² - 1)/2 + … */
export function legendre(coefficients: readonly number[], u: number): number {
  let before = 1;
  let current = u;
  let sum = coefficients[0];
  for (let order = 1; order < coefficients.length; order++) {
    sum += coefficients[order] * current;
    const next = ((2 * order + 1) * u * current - order * before) / (order + 1);
    before = current;
    current = next;
  }
  return sum;
}

/** Legendre polynomials of degree 0 to `degree` at u. */
export function legendreBasis(u: number, degree: number): number[] {
  const basis = [1, u];
  for (let order = 1; order < degree; order++) {
    basis.push(((2 * order + 1) * u * basis[order] - order * basis[order - 1]) / (order + 1));
  }
  return basis.slice(0, degree + 1);
}

/**
 * Weighted least squares of a Legendre series whose degree is the one with the least chi-square plus 5 per term; a
 * value counts in that with at most 16.
 *
 * @param at rising places on -1 to 1; the degree stays below a third of their number and below what their widest gap bears
 * @param values one per place
 * @param deviations standard deviation of each value
 * @param robust true: values far off (more than 2.5 deviations) lose weight, after Huber
 * @param highest highest degree tried
 */
export function fitPolynomial(
  at: readonly number[],
  values: readonly number[],
  deviations: readonly number[],
  robust: boolean,
  highest = 2,
): PolynomialFit {
  let widest = 0;
  for (let index = 1; index < at.length; index++) widest = Math.max(widest, at[index] - at[index - 1]);
  const bearable = Math.max(2, Math.floor(1.2 / Math.max(widest, 1e-9)));
  const last = Math.min(highest, bearable, Math.max(1, Math.floor(at.length / 3)), at.length - 1);
  let best = fitDegree(at, values, deviations, robust, 0);
  let bestCost = chiSquare(at, values, deviations, best);
  for (let degree = 1; degree <= last; degree++) {
    const fit = fitDegree(at, values, deviations, robust, degree);
    const cost = chiSquare(at, values, deviations, fit) + WORTH_OF_A_TERM * degree;
    if (cost < bestCost) {
      best = fit;
      bestCost = cost;
    } else if (degree >= best.degree + 4) {
      break;
    }
  }
  return best;
}

function chiSquare(
  at: readonly number[],
  values: readonly number[],
  deviations: readonly number[],
  fit: PolynomialFit,
): number {
  return values.reduce((sum, value, index) => {
    const sigmas = (value - legendre(fit.coefficients, at[index])) / deviations[index];
    return sum + Math.min(16, sigmas * sigmas);
  }, 0);
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
