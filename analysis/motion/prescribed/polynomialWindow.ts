import { inverse } from '../polynomialFit.ts';

/** Least-squares polynomials through the values at given times, all of equal weight. */
export interface PolynomialWindow {
  /** Weights of the values for a derivative (0 … degree) at an instant [1/s^derivative]. */
  weights(atS: number, derivative: number): Float64Array;
}

/**
 * Savitzky & Golay, Anal. Chem. 36 (1964) 1627, on whatever times. Powers are taken about the window's middle in units of its half, so
 * the normal equations stay far from singular for instants at its edge too. Cost O(n · degree²), and O(n · degree) for each row.
 *
 * @returns null when there are fewer points than coefficients
 */
export function polynomialWindow(timeS: Float64Array, degree: number): PolynomialWindow | null {
  const n = timeS.length;
  const terms = degree + 1;
  if (n < terms) return null;
  const middleS = (timeS[0] + timeS[n - 1]) / 2;
  const halfS = (timeS[n - 1] - timeS[0]) / 2;
  const tau = timeS.map((t) => (t - middleS) / halfS);
  const moments = new Float64Array(2 * terms - 1);
  for (const x of tau) {
    let power = 1;
    for (let k = 0; k < moments.length; k++) {
      moments[k] += power;
      power *= x;
    }
  }
  const normal = new Float64Array(terms * terms);
  for (let a = 0; a < terms; a++) for (let b = 0; b < terms; b++) normal[a * terms + b] = moments[a + b];
  const covariance = inverse(normal, terms);
  if (!covariance) return null;
  return {
    weights(atS, derivative) {
      const at = (atS - middleS) / halfS;
      // The derivative of each power at the instant, through the covariance, to the points.
      const coefficients = new Float64Array(terms);
      for (let b = derivative; b < terms; b++) {
        const power = (falling(b, derivative) * at ** (b - derivative)) / halfS ** derivative;
        for (let a = 0; a < terms; a++) coefficients[a] += power * covariance[a * terms + b];
      }
      return tau.map((x) => {
        let sum = 0;
        for (let a = degree; a >= 0; a--) sum = sum * x + coefficients[a];
        return sum;
      });
    },
  };
}

/** b (b - 1) … of q factors. */
function falling(b: number, q: number): number {
  let product = 1;
  for (let k = 0; k < q; k++) product *= b - k;
  return product;
}
