import type { Band } from './banded.ts';
import { type Cells, cellAt, order as functions, writeRow } from './cells.ts';

// A copy: it stands in the innermost loops.
const order = functions;

/** What observations say of the coefficients: weighted normal equations. */
export interface Information {
  readonly matrix: Band;
  readonly right: Float64Array;
  /** Weighted sum of squares of the values, and sum of the weights. */
  squares: number;
  weights: number;
}

/** An observation of a derivative (0: the value itself). */
export interface Observation {
  readonly time: number;
  readonly derivative: number;
  readonly value: number;
  readonly u: number;
}

function noInformation({ size }: Cells): Information {
  // Four spare rows, so that no sum over five functions runs past the end.
  const matrix = new Float64Array((size + order) * order);
  return { matrix, right: new Float64Array(size), squares: 0, weights: 0 };
}

/** Normal equations of positions at increasing times. Cost O(n). */
export function informationOf(
  cells: Cells,
  time: Float64Array,
  value: Float64Array,
  u: Float64Array,
): Information {
  const info = noInformation(cells);
  const row = new Float64Array(order);
  let j = 0;
  for (let i = 0; i < time.length; i++) {
    while (j < cells.count - 1 && time[i] >= cells.edges[j + 1]) j++;
    writeRow(cells, j, time[i], 0, row);
    addRow(info, j, row, value[i], 1 / (u[i] * u[i]));
  }
  return info;
}

export function informationOfObservations(cells: Cells, observations: readonly Observation[]): Information {
  const info = noInformation(cells);
  const row = new Float64Array(order);
  for (const { time, derivative, value, u } of observations) {
    const j = cellAt(cells, time);
    writeRow(cells, j, time, derivative, row);
    addRow(info, j, row, value, 1 / (u * u));
  }
  return info;
}

function addRow(info: Information, j: number, row: Float64Array, value: number, weight: number): void {
  const { matrix, right } = info;
  for (let m = 0; m < order; m++) {
    const w = weight * row[m];
    right[j + m] += w * value;
    const a = (j + m) * order - m;
    for (let d = m; d < order; d++) matrix[a + d] += w * row[d];
  }
  info.squares += weight * value * value;
  info.weights += weight;
}
