/**
 * Correlation of residuals from one frame to the next, 0 where it is not significant (below two of its standard errors, 1/√n) and at
 * most 0.9. Only pairs of neighbouring frames count.
 *
 * @param frame  frame numbers, ascending
 */
export function lagOneCorrelation(residuals: Float64Array, frame: Int32Array): number {
  let squares = 0;
  let products = 0;
  let pairs = 0;
  let n = 0;
  for (let i = 0; i < residuals.length; i++) {
    if (!Number.isFinite(residuals[i])) continue;
    n++;
    squares += residuals[i] ** 2;
    if (i > 0 && frame[i] === frame[i - 1] + 1 && Number.isFinite(residuals[i - 1])) {
      products += residuals[i] * residuals[i - 1];
      pairs++;
    }
  }
  if (pairs < 8 || squares === 0) return 0;
  const correlation = products / pairs / (squares / n);
  return correlation > 2 / Math.sqrt(pairs) ? Math.min(correlation, 0.9) : 0;
}
