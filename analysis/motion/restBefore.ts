import type { Rest } from './method.ts';
import { inflation } from './residuals.ts';

/** Place of a body before its release: weighted mean of the positions there, its uncertainty widened as they scatter. */
export function restBefore(
  valueM: Float64Array,
  uM: Float64Array,
  releaseS: number,
  uReleaseS: number,
): Rest | null {
  const n = valueM.length;
  if (n === 0) return null;
  let weights = 0;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    weights += 1 / uM[i] ** 2;
    sum += valueM[i] / uM[i] ** 2;
  }
  const mean = sum / weights;
  const standardised = valueM.map((v, i) => (v - mean) / (uM[i] * Math.sqrt(1 - 1 / (uM[i] ** 2 * weights))));
  return {
    timeS: releaseS,
    uTimeS: uReleaseS,
    valueM: mean,
    uValueM: inflation(standardised, 0, n) / Math.sqrt(weights),
  };
}
