import { type Band, quadraticForm } from './banded.ts';
import { type Cells, cellAt, order as functions, writeRow } from './cells.ts';

// A copy: it stands in the innermost loops.
const order = functions;

/** Values of a derivative (0 … 3) at given times, which must not decrease. */
export function valuesAt(
  cells: Cells,
  coefficients: Float64Array,
  time: Float64Array,
  derivative: number,
): Float64Array {
  return along(cells, time, derivative, (j, row) => {
    let sum = 0;
    for (let m = 0; m < order; m++) sum += row[m] * coefficients[j + m];
    return sum;
  });
}

/** Variances of a derivative at given times, which must not decrease. */
export function variancesAt(
  cells: Cells,
  covariance: Band,
  time: Float64Array,
  derivative: number,
): Float64Array {
  return along(cells, time, derivative, (j, row) => quadraticForm(covariance, j, row));
}

function along(
  cells: Cells,
  time: Float64Array,
  derivative: number,
  of: (j: number, row: Float64Array) => number,
): Float64Array {
  const row = new Float64Array(order);
  const out = new Float64Array(time.length);
  let j = time.length > 0 ? cellAt(cells, time[0]) : 0;
  for (let i = 0; i < time.length; i++) {
    while (j < cells.count - 1 && time[i] >= cells.edges[j + 1]) j++;
    writeRow(cells, j, time[i], derivative, row);
    out[i] = of(j, row);
  }
  return out;
}
