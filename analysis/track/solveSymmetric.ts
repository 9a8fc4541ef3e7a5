/** Solves small symmetric positive definite systems of one size again and again; holds its buffers. */
export interface SymmetricSolver {
  /** Inverse of the last matrix, n × n, row by row. */
  readonly inverse: Float64Array;
  /**
   * Takes the upper triangle of an n × n matrix (row by row) and fills `inverse`; false if it is not positive definite.
   * Gauss-Jordan without pivoting, which positive definite matrices do not need.
   */
  invert(upper: Float64Array): boolean;
}

export function makeSymmetricSolver(n: number): SymmetricSolver {
  const m = new Float64Array(n * n);
  const inverse = new Float64Array(n * n);
  return {
    inverse,
    invert(upper) {
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) {
          m[i * n + j] = i <= j ? upper[i * n + j] : upper[j * n + i];
          inverse[i * n + j] = i === j ? 1 : 0;
        }
      }
      for (let i = 0; i < n; i++) {
        const pivot = m[i * n + i];
        if (!(pivot > 1e-12 * upper[i * n + i])) return false;
        for (let j = 0; j < n; j++) {
          m[i * n + j] /= pivot;
          inverse[i * n + j] /= pivot;
        }
        for (let k = 0; k < n; k++) {
          const factor = m[k * n + i];
          if (k === i || factor === 0) continue;
          for (let j = 0; j < n; j++) {
            m[k * n + j] -= factor * m[i * n + j];
            inverse[k * n + j] -= factor * inverse[i * n + j];
          }
        }
      }
      return true;
    },
  };
}
