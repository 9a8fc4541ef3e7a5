import { type Band, bandCholesky, bandOfInverse, bandSolve } from './banded.ts';
import { type Cells, order as functions, triangle as products } from './cells.ts';
import type { Information } from './information.ts';

// Copies of what is imported: these stand in the innermost loops.
const order = functions;
const triangle = products;
/** No density is less than that whose averaging time is this many cells: the equations would lose their digits. */
const mostCells = 1 / 0.07;

/** The curve given the data, for one density of the snap in each cell. */
export interface Posterior {
  readonly coefficients: Float64Array;
  /** Cholesky factor of the coefficients' inverse covariance. */
  readonly factor: Band;
  readonly covariance: Band;
  /** Log of the probability of the data given the densities, up to a constant. */
  readonly logEvidence: number;
  /** Its derivative by the log density of each cell. */
  readonly slope: Float64Array;
  /** How much of each cell's snap comes from the data and not from the prior: 0 … 1. */
  readonly fromData: Float64Array;
}

/**
 * Gaussian-process smoother whose fourth derivative is white noise: constant within a cell, variance density / width there, nothing
 * known of the cubic beneath. Weinert, Byrd & Sidhu, J. Optim. Theory Appl. 30 (1980) 255, for the equivalence with splines; log
 * evidence and its derivative as in Rasmussen & Williams 2006, ch. 5, worked out with the band of the inverse.
 *
 * @param data      normal equations of the positions, to be divided by `noise`
 * @param noise     factor on the positions' variances
 * @param fixed     normal equations that stay as they are
 * @param logDensity  per cell
 * Cost O(cells).
 * @returns null when the densities are beyond what the arithmetic bears
 */
export function posterior(
  cells: Cells,
  data: Information,
  noise: number,
  fixed: Information,
  logDensity: Float64Array,
): Posterior | null {
  const { edges, count, size, snap, snapProducts } = cells;
  const matrix = new Float64Array((size + order) * order);
  const coefficients = new Float64Array(size);
  for (let k = 0; k < matrix.length; k++) matrix[k] = data.matrix[k] / noise + fixed.matrix[k];
  for (let k = 0; k < size; k++) coefficients[k] = data.right[k] / noise + fixed.right[k];
  const right = Float64Array.from(coefficients);
  let logEvidence = 0;
  const weight = new Float64Array(count);
  const share = new Float64Array(count);
  for (let j = 0; j < count; j++) {
    const width = edges[j + 1] - edges[j];
    const density = Math.exp(logDensity[j]);
    const least = (noise / data.weights) * (mostCells * width) ** -8;
    const w = width / (density + least);
    weight[j] = w;
    share[j] = density / (density + least);
    logEvidence += 0.5 * Math.log(w);
    let p = j * triangle;
    for (let m = 0; m < order; m++) {
      const a = (j + m) * order - m;
      for (let d = m; d < order; d++) matrix[a + d] += w * snapProducts[p++];
    }
  }
  const factor = bandCholesky(matrix, size);
  if (!factor) return null;
  bandSolve(factor, size, coefficients);
  let explained = 0;
  for (let k = 0; k < size; k++) {
    explained += right[k] * coefficients[k];
    logEvidence -= Math.log(factor[k * order]);
  }
  logEvidence -= 0.5 * (data.squares / noise + fixed.squares - explained);
  const covariance = bandOfInverse(factor, size);
  const slope = new Float64Array(count);
  const fromData = new Float64Array(count);
  for (let j = 0; j < count; j++) {
    let s = 0;
    for (let m = 0; m < order; m++) s += snap[j * order + m] * coefficients[j + m];
    let left = 0;
    let p = j * triangle;
    for (let m = 0; m < order; m++) {
      const a = (j + m) * order - m;
      left += snapProducts[p++] * covariance[a + m];
      for (let d = m + 1; d < order; d++) left += 2 * snapProducts[p++] * covariance[a + d];
    }
    fromData[j] = Math.min(1, Math.max(0, 1 - left * weight[j]));
    slope[j] = 0.5 * share[j] * (s * s * weight[j] - fromData[j]);
  }
  return { coefficients, factor, covariance, logEvidence, slope, fromData };
}
