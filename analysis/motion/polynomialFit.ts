/** A weighted least-squares polynomial, in powers of τ = (t - centreS)/spanS. */
export interface PolynomialFit {
  readonly coefficients: Float64Array;
  /** Covariance of the coefficients for the weights given (not scaled with the residuals); (degree + 1)², row by row. */
  readonly covariance: Float64Array;
}

/**
 * Weighted least squares of a polynomial by the normal equations on τ in [-1, 1]; with degree ≤ 6 their condition stays below
 * 1e6, far from what double precision bears.
 *
 * @param from, to   range of indices, to exclusive
 * @returns null when there are too few points
 */
export function polynomialFit(
  timeS: Float64Array,
  values: Float64Array,
  u: Float64Array,
  from: number,
  to: number,
  centreS: number,
  spanS: number,
  degree: number,
): PolynomialFit | null {
  const terms = degree + 1;
  if (to - from < terms) return null;
  const normal = new Float64Array(terms * terms);
  const right = new Float64Array(terms);
  const moments = new Float64Array(2 * terms - 1);
  for (let i = from; i < to; i++) {
    const tau = (timeS[i] - centreS) / spanS;
    const w = 1 / (u[i] * u[i]);
    let power = w;
    for (let k = 0; k < 2 * terms - 1; k++) {
      moments[k] += power;
      if (k < terms) right[k] += power * values[i];
      power *= tau;
    }
  }
  for (let a = 0; a < terms; a++) for (let b = 0; b < terms; b++) normal[a * terms + b] = moments[a + b];
  const covariance = inverse(normal, terms);
  if (!covariance) return null;
  const coefficients = new Float64Array(terms);
  for (let a = 0; a < terms; a++)
    for (let b = 0; b < terms; b++) coefficients[a] += covariance[a * terms + b] * right[b];
  return { coefficients, covariance };
}

/** Inverse of a symmetric positive definite matrix by Cholesky; null when it is not. */
export function inverse(matrix: Float64Array, n: number): Float64Array | null {
  const l = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * n + j];
      for (let k = 0; k < j; k++) sum -= l[i * n + k] * l[j * n + k];
      if (i === j) {
        if (!(sum > 1e-14 * matrix[i * n + i])) return null;
        l[i * n + i] = Math.sqrt(sum);
      } else l[i * n + j] = sum / l[j * n + j];
    }
  }
  const out = new Float64Array(n * n);
  for (let column = 0; column < n; column++) {
    const y = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      let sum = i === column ? 1 : 0;
      for (let k = 0; k < i; k++) sum -= l[i * n + k] * y[k];
      y[i] = sum / l[i * n + i];
    }
    for (let i = n - 1; i >= 0; i--) {
      let sum = y[i];
      for (let k = i + 1; k < n; k++) sum -= l[k * n + i] * out[k * n + column];
      out[i * n + column] = sum / l[i * n + i];
    }
  }
  return out;
}
