/** Second-order low-pass: y_i = a0 x_i + a1 x_{i-1} + a2 x_{i-2} + b1 y_{i-1} + b2 y_{i-2}. */
export interface LowPass {
  readonly a0: number;
  readonly a1: number;
  readonly a2: number;
  readonly b1: number;
  readonly b2: number;
}

/** Where one run is 3 dB down, both together are 6 dB; the two-run filter is 3 dB down at this share of the corner. */
export const twoRunShare = (Math.SQRT2 - 1) ** (1 / 4);

/**
 * Butterworth low-pass by the bilinear transformation.
 *
 * @param warped  tan(ω Δt / 2) of the corner ω of one run
 */
export function lowPass(warped: number): LowPass {
  const square = warped * warped;
  const norm = 1 + Math.SQRT2 * warped + square;
  const a0 = square / norm;
  return {
    a0,
    a1: 2 * a0,
    a2: a0,
    b1: (-2 * (square - 1)) / norm,
    b2: (-1 + Math.SQRT2 * warped - square) / norm,
  };
}

/**
 * Both runs, forward and backward, over values that are mirrored at their ends (the end itself not doubled).
 *
 * @param padded  points mirrored at each end; any number
 * @returns padded + n + padded values. Cost O(n + padded).
 */
export function forwardAndBackward(values: Float64Array, filter: LowPass, padded: number): Float64Array {
  const out = new Float64Array(values.length + 2 * padded);
  for (let k = 0; k < out.length; k++) out[k] = values[mirrored(k - padded, values.length)];
  run(out, filter);
  out.reverse();
  run(out, filter);
  return out.reverse();
}

/** Index within 0 … n - 1 of a point beyond the ends. */
export function mirrored(index: number, n: number): number {
  if (n === 1) return 0;
  const period = 2 * (n - 1);
  const k = ((index % period) + period) % period;
  return k < n ? k : period - k;
}

/** In place, from rest at the first value. */
function run(values: Float64Array, { a0, a1, a2, b1, b2 }: LowPass): void {
  let x1 = values[0];
  let x2 = x1;
  let y1 = x1;
  let y2 = x1;
  for (let i = 0; i < values.length; i++) {
    const x = values[i];
    const y = a0 * x + a1 * x1 + a2 * x2 + b1 * y1 + b2 * y2;
    x2 = x1;
    x1 = x;
    y2 = y1;
    y1 = y;
    values[i] = y;
  }
}
