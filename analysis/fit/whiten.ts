/**
 * Takes the correlation from neighbour to neighbour out of standardised residuals or their derivatives (first-order autoregression):
 * w_i = (r_i - ρ^k r_{i-1})/√(1 - ρ^2k), k the number of frames between the two, so that gaps count less.
 *
 * @param frame  frame numbers, strictly ascending
 * @param correlation  ρ from one frame to the next, 0 ≤ ρ < 1
 */
export function whiten(rows: Float64Array, frame: Int32Array, correlation: number): Float64Array {
  if (correlation === 0) return rows;
  return rows.map((row, i) => {
    if (i === 0) return row;
    const rho = correlation ** (frame[i] - frame[i - 1]);
    return (row - rho * rows[i - 1]) / Math.sqrt(1 - rho * rho);
  });
}
