/** A model's curve, y up, y = 0 at the start; all arrays have the length of timeS. */
export interface Curve {
  readonly timeS: Float64Array;
  readonly yM: Float64Array;
  readonly vyMps: Float64Array;
  readonly ayMps2: Float64Array;
}

export function emptyCurve(timeS: Float64Array): Curve {
  const n = timeS.length;
  return { timeS, yM: new Float64Array(n), vyMps: new Float64Array(n), ayMps2: new Float64Array(n) };
}
