/**
 * Mean, experimental standard deviation and standard deviation of the mean of independent readings (JCGM 100:2008, 4.2).
 *
 * @throws RangeError with fewer than two readings
 */
export function typeA(readings: ArrayLike<number>): { mean: number; s: number; uMean: number; dof: number } {
  const n = readings.length;
  if (n < 2) throw new RangeError(`typeA: ${n} readings; two are the least that have a scatter`);
  // Shift by the first reading so that large offsets do not eat the digits of the scatter.
  const shift = readings[0];
  let sum = 0;
  for (let i = 0; i < n; i++) sum += readings[i] - shift;
  const meanShifted = sum / n;
  let squares = 0;
  for (let i = 0; i < n; i++) squares += (readings[i] - shift - meanShifted) ** 2;
  const s = Math.sqrt(squares / (n - 1));
  return { mean: shift + meanShifted, s, uMean: s / Math.sqrt(n), dof: n - 1 };
}
