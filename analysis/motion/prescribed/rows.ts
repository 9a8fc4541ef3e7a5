import type { Derivatives } from './linearSmoother.ts';

/** Weights of consecutive points, from the point with index `from` on. */
export interface Row {
  readonly from: number;
  readonly weights: Float64Array;
}

/** The weights of one instant for each quantity; jerk where the method gives it. */
export interface InstantRows {
  readonly position: Row;
  readonly velocity: Row;
  readonly acceleration: Row;
  readonly jerk: Row | null;
}

export function weightedSum({ from, weights }: Row, values: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < weights.length; k++) sum += weights[k] * values[from + k];
  return sum;
}

/** Standard uncertainty of the sum when those of the points are uncorrelated. */
export function uOfSum({ from, weights }: Row, u: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < weights.length; k++) sum += (weights[k] * u[from + k]) ** 2;
  return Math.sqrt(sum);
}

/** Each instant's rows worked out by `of`; NaN where an instant has none. */
export function byRows(rows: readonly (InstantRows | null)[], of: (row: Row) => number): Derivatives {
  const each = (quantity: (r: InstantRows) => Row | null) =>
    Float64Array.from(rows, (r) => {
      const row = r && quantity(r);
      return row ? of(row) : Number.NaN;
    });
  return {
    position: each((r) => r.position),
    velocity: each((r) => r.velocity),
    acceleration: each((r) => r.acceleration),
    jerk: rows.some((r) => r?.jerk) ? each((r) => r.jerk) : null,
  };
}
