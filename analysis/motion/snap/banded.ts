/** Entries of a row: the diagonal and four to its right. */
const rowLength = 5;

/**
 * Symmetric matrices of half-bandwidth 4 as rows of five: entry (i, i + d) at 5 i + d, d = 0 … 4. Here they are sums over cells,
 * positive definite as soon as four data are there.
 */
export type Band = Float64Array;

/** Cholesky factor R, upper, of a band matrix (RᵀR); null when it is not positive definite. */
export function bandCholesky(matrix: Band, size: number): Band | null {
  const r = Float64Array.from(matrix);
  for (let i = 0; i < size; i++) {
    const a = i * rowLength;
    if (!(r[a] > 0)) return null;
    const pivot = Math.sqrt(r[a]);
    r[a] = pivot;
    const reach = Math.min(rowLength, size - i);
    for (let d = 1; d < reach; d++) r[a + d] /= pivot;
    for (let d = 1; d < reach; d++) {
      const f = r[a + d];
      const b = (i + d) * rowLength - d;
      for (let e = d; e < reach; e++) r[b + e] -= f * r[a + e];
    }
  }
  return r;
}

/** Solves RᵀR x = y in place. */
export function bandSolve(r: Band, size: number, x: Float64Array): void {
  for (let i = 0; i < size; i++) {
    const a = i * rowLength;
    x[i] /= r[a];
    const reach = Math.min(rowLength, size - i);
    for (let d = 1; d < reach; d++) x[i + d] -= r[a + d] * x[i];
  }
  solveUpper(r, size, x);
}

/** Solves R x = y in place. */
function solveUpper(r: Band, size: number, x: Float64Array): void {
  for (let i = size - 1; i >= 0; i--) {
    const a = i * rowLength;
    const reach = Math.min(rowLength, size - i);
    let sum = x[i];
    for (let d = 1; d < reach; d++) sum -= r[a + d] * x[i + d];
    x[i] = sum / r[a];
  }
}

/** Where entry (i + e, i + d) of a band matrix stands from the start of row i: row e - 1, column d - 1, both from 1. */
const within = Int32Array.from({ length: 16 }, (_, k) => {
  const [e, d] = [(k >> 2) + 1, (k & 3) + 1];
  return Math.min(e, d) * rowLength + Math.abs(e - d);
});

/** The band of (RᵀR)⁻¹: Takahashi's recursion (Erisman & Tinney, Commun. ACM 18 (1975) 177). */
export function bandOfInverse(r: Band, size: number): Band {
  // Rows past the end are zero and take no part.
  const z = new Float64Array((size + rowLength) * rowLength);
  for (let i = size - 1; i >= 0; i--) {
    const a = i * rowLength;
    const pivot = 1 / r[a];
    const reach = Math.min(rowLength, size - i);
    let diagonal = pivot;
    for (let d = 1; d < reach; d++) {
      let sum = 0;
      for (let e = 1; e < reach; e++) sum -= r[a + e] * z[a + within[(e - 1) * 4 + d - 1]];
      sum *= pivot;
      z[a + d] = sum;
      diagonal -= r[a + d] * sum;
    }
    z[a] = diagonal * pivot;
  }
  return z;
}

/** Quadratic form of five weights, which belong to rows from `from` on, with a band matrix. */
export function quadraticForm(z: Band, from: number, row: Float64Array): number {
  let sum = 0;
  for (let m = 0; m < rowLength; m++) {
    const a = (from + m) * rowLength;
    let line = row[m] * z[a];
    for (let d = 1; m + d < rowLength; d++) line += 2 * row[m + d] * z[a + d];
    sum += row[m] * line;
  }
  return sum;
}
