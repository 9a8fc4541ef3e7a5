/** Root mean square of the finite ones of some values; NaN where there is none. */
export function rootMeanSquare(values: ArrayLike<number>): number {
  let squares = 0;
  let n = 0;
  for (let i = 0; i < values.length; i++) {
    if (!Number.isFinite(values[i])) continue;
    squares += values[i] ** 2;
    n++;
  }
  return Math.sqrt(squares / n);
}
