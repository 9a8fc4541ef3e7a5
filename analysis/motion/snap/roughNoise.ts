/** Median of χ² with one degree of freedom. */
const medianSquare = 0.4549;
const points = 5;

/**
 * Variance of the noise over the stated one, as a first guess: median of the squared fourth differences of neighbours, which a cubic
 * does not touch, on whatever times. It holds what is correlated from frame to frame only in part.
 */
export function roughNoise(time: Float64Array, value: Float64Array, u: Float64Array): number {
  const squares: number[] = [];
  for (let i = 0; i + points <= time.length; i++) {
    const span = time[i + points - 1] - time[i];
    let difference = 0;
    let variance = 0;
    for (let k = i; k < i + points; k++) {
      let product = 1;
      for (let j = i; j < i + points; j++) if (j !== k) product *= (time[k] - time[j]) / span;
      difference += value[k] / product;
      variance += (u[k] / product) ** 2;
    }
    squares.push((difference * difference) / variance);
  }
  squares.sort((a, b) => a - b);
  const middle = (squares[squares.length >> 1] ?? medianSquare) / medianSquare;
  return middle > 0 ? middle : 1;
}
