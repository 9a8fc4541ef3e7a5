import type { Arithmetic, Operand } from './arithmetic.ts';

/**
 * Solves A x = b by elimination with row exchange, in any arithmetic: with dual numbers the solution carries its derivatives.
 *
 * @param matrix  n rows of n
 * @throws RangeError if the sizes do not fit or the matrix is singular
 * Cost O(n³) operations; for a handful of unknowns.
 */
export function solveLinear<T>(
  m: Arithmetic<T>,
  matrix: readonly (readonly Operand<T>[])[],
  right: readonly Operand<T>[],
): T[] {
  const n = matrix.length;
  if (right.length !== n || matrix.some((row) => row.length !== n)) {
    throw new RangeError(`solveLinear: ${n} rows need ${n} columns and ${n} right sides`);
  }
  const rows: Operand<T>[][] = matrix.map((row, i) => [...row, right[i]]);
  const size = (x: Operand<T>) => Math.abs(m.valueOf(x));
  for (let c = 0; c < n; c++) {
    let pivot = c;
    for (let r = c + 1; r < n; r++) if (size(rows[r][c]) > size(rows[pivot][c])) pivot = r;
    if (!(size(rows[pivot][c]) > 0)) throw new RangeError('solveLinear: the matrix is singular');
    [rows[c], rows[pivot]] = [rows[pivot], rows[c]];
    for (let r = c + 1; r < n; r++) {
      if (size(rows[r][c]) === 0 && typeof rows[r][c] === 'number') continue;
      const share = m.divide(rows[r][c], rows[c][c]);
      for (let k = c; k <= n; k++) rows[r][k] = m.subtract(rows[r][k], m.multiply(share, rows[c][k]));
    }
  }
  const x: T[] = [];
  for (let r = n - 1; r >= 0; r--) {
    let rest = rows[r][n];
    for (let k = r + 1; k < n; k++) rest = m.subtract(rest, m.multiply(rows[r][k], x[k]));
    x[r] = m.divide(rest, rows[r][r]);
  }
  return x;
}

/**
 * Least squares by the normal equations of columns scaled to one size, in any arithmetic: design and readings may both carry
 * derivatives, so a fit can be a step of a measurement function.
 *
 * @param design   one row of p figures for each reading
 * @param weights  plain weights 1/u², one for each reading; left out: all alike
 * @returns p coefficients
 * @throws RangeError with fewer readings than coefficients, or when the columns are not independent
 */
export function leastSquares<T>(
  m: Arithmetic<T>,
  design: readonly (readonly Operand<T>[])[],
  readings: readonly Operand<T>[],
  weights?: ArrayLike<number>,
): T[] {
  const p = design[0]?.length ?? 0;
  if (p === 0 || design.length < p || readings.length !== design.length) {
    throw new RangeError(`leastSquares: ${readings.length} readings for ${p} coefficients`);
  }
  const weight = (i: number) => weights?.[i] ?? 1;
  const scale = Array.from({ length: p }, (_, c) =>
    Math.sqrt(design.reduce((sum, row, i) => sum + weight(i) * m.valueOf(row[c]) ** 2, 0)),
  );
  if (scale.some((s) => !(s > 0))) throw new RangeError('leastSquares: a column is zero');
  const normal: T[][] = Array.from({ length: p }, () => []);
  const right: T[] = [];
  for (let a = 0; a < p; a++) {
    for (let b = 0; b <= a; b++) {
      const each = design.map((row, i) => m.multiply(row[a], row[b], weight(i) / (scale[a] * scale[b])));
      normal[a][b] = m.add(...each);
      normal[b][a] = normal[a][b];
    }
    right[a] = m.add(...design.map((row, i) => m.multiply(row[a], readings[i], weight(i) / scale[a])));
  }
  return solveLinear(m, normal, right).map((x, c) => m.divide(x, scale[c]));
}
