/**
 * Householder's reduction of a tall least-squares system to a square one: |J δ + r| is least where |R δ + q| is.
 *
 * @param columns  n columns of equal length m; m may be less than n (the missing rows are 0)
 * @returns R as rows (upper triangle, n × n) and q (n); the inputs stay as they are
 * Cost 2mn². Golub & Van Loan, Matrix Computations, algorithm 5.2.1.
 */
export function triangular(
  columns: readonly Float64Array[],
  right: Float64Array,
): { readonly r: readonly Float64Array[]; readonly q: Float64Array } {
  const n = columns.length;
  const m = Math.max(right.length, n);
  const work = [...columns, right].map((column) => {
    const copy = new Float64Array(m);
    copy.set(column);
    return copy;
  });
  for (let k = 0; k < n; k++) {
    const pivot = work[k];
    let norm = 0;
    for (let i = k; i < m; i++) norm = Math.hypot(norm, pivot[i]);
    if (norm === 0) continue;
    const alpha = pivot[k] > 0 ? -norm : norm;
    const v = pivot.slice(k);
    v[0] -= alpha;
    let vv = 0;
    for (const x of v) vv += x * x;
    for (let j = k; j <= n; j++) {
      const column = work[j];
      let dot = 0;
      for (let i = k; i < m; i++) dot += v[i - k] * column[i];
      const factor = (2 * dot) / vv;
      for (let i = k; i < m; i++) column[i] -= factor * v[i - k];
    }
  }
  const r = Array.from({ length: n }, (_, i) =>
    Float64Array.from({ length: n }, (_, j) => (j < i ? 0 : work[j][i])),
  );
  return { r, q: work[n].slice(0, n) };
}

/** Solves R x = b for an upper triangle without zeros on its diagonal. */
export function backSubstitute(r: readonly Float64Array[], b: Float64Array): Float64Array {
  const n = b.length;
  const x = new Float64Array(n);
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i];
    for (let j = i + 1; j < n; j++) sum -= r[i][j] * x[j];
    x[i] = sum / r[i][i];
  }
  return x;
}
