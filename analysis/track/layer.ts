import { quinticCoefficients, quinticSamples, quinticWeights, TAPS, TAPS_BEFORE } from './spline.ts';

/** Pixels around the window that its spline reaches for a shift of less than a pixel. */
export const REACH = 3;

/**
 * A square picture of side 2 · half + 1 around the body's own zero, as a quintic spline, with a border of REACH so that it
 * can be shifted by less than a pixel.
 */
export interface Layer {
  readonly half: number;
  readonly coefficients: Float64Array;
}

/** A layer and its slopes, sampled on the window's whole pixels after a shift. Buffers are reused from call to call. */
export interface Sampled {
  readonly value: Float64Array;
  readonly slopeX: Float64Array;
  readonly slopeY: Float64Array;
}

/** @param samples  (2 · (half + REACH) + 1)² values, row by row; they are consumed */
export function makeLayer(samples: Float64Array, half: number): Layer {
  const side = 2 * (half + REACH) + 1;
  if (samples.length !== side * side)
    throw new RangeError(`makeLayer: ${samples.length} samples for a side of ${side}`);
  return { half, coefficients: quinticCoefficients(samples, side, side) };
}

/** A layer's samples, as `makeLayer` took them. */
export function samplesOf({ half, coefficients }: Layer): Float64Array {
  return quinticSamples(coefficients, 2 * (half + REACH) + 1);
}

export function sampledFor(half: number): Sampled {
  const n = (2 * half + 1) ** 2;
  return { value: new Float64Array(n), slopeX: new Float64Array(n), slopeY: new Float64Array(n) };
}

/** Part of a window, in its own columns and rows, ends included. */
export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** A point of a body's window, from its zero [px]. */
export interface WindowPoint {
  readonly x: number;
  readonly y: number;
}

/** Samples layers of one size; holds the buffers of the separable evaluation. */
export interface Sampler {
  /**
   * Values and slopes of the layer moved by (dxPx, dyPx), |d| < 1: into(u) = layer(u - d) for whole u.
   * The slopes are with respect to u. Only the pixels of the box are filled, where one is given.
   */
  sample(layer: Layer, dxPx: number, dyPx: number, into: Sampled, box?: Box): void;
}

/** Cost per sample: 30 · (2 · half + 1)² multiplications. */
export function makeSampler(half: number): Sampler {
  const side = 2 * half + 1;
  const wide = side + 2 * REACH;
  const rowValue = new Float64Array(wide * side);
  const rowSlope = new Float64Array(wide * side);
  const whole = { left: 0, top: 0, right: side - 1, bottom: side - 1 };
  const wx = new Float64Array(TAPS);
  const sx = new Float64Array(TAPS);
  const wy = new Float64Array(TAPS);
  const sy = new Float64Array(TAPS);

  return {
    sample(layer, dxPx, dyPx, into, box = whole) {
      const { left, top, right, bottom } = box;
      const c = layer.coefficients;
      const wholeX = Math.floor(-dxPx);
      const wholeY = Math.floor(-dyPx);
      quinticWeights(-dxPx - wholeX, wx, sx);
      quinticWeights(-dyPx - wholeY, wy, sy);
      const [w0, w1, w2, w3, w4, w5] = wx;
      const [s0, s1, s2, s3, s4, s5] = sx;
      const first = REACH + wholeX - TAPS_BEFORE;
      const firstRow = REACH + wholeY - TAPS_BEFORE;
      for (let row = top + firstRow; row < bottom + firstRow + TAPS; row++) {
        let at = row * wide + first + left;
        const out = row * side;
        for (let i = left; i <= right; i++, at++) {
          const c0 = c[at];
          const c1 = c[at + 1];
          const c2 = c[at + 2];
          const c3 = c[at + 3];
          const c4 = c[at + 4];
          const c5 = c[at + 5];
          rowValue[out + i] = w0 * c0 + w1 * c1 + w2 * c2 + w3 * c3 + w4 * c4 + w5 * c5;
          rowSlope[out + i] = s0 * c0 + s1 * c1 + s2 * c2 + s3 * c3 + s4 * c4 + s5 * c5;
        }
      }
      const [v0, v1, v2, v3, v4, v5] = wy;
      const [t0, t1, t2, t3, t4, t5] = sy;
      for (let row = top; row <= bottom; row++) {
        let a = (row + firstRow) * side + left;
        const out = row * side;
        for (let i = left; i <= right; i++, a++) {
          const b = a + side;
          const d = b + side;
          const e = d + side;
          const f = e + side;
          const g = f + side;
          const ra = rowValue[a];
          const rb = rowValue[b];
          const rd = rowValue[d];
          const re = rowValue[e];
          const rf = rowValue[f];
          const rg = rowValue[g];
          into.value[out + i] = v0 * ra + v1 * rb + v2 * rd + v3 * re + v4 * rf + v5 * rg;
          into.slopeY[out + i] = t0 * ra + t1 * rb + t2 * rd + t3 * re + t4 * rf + t5 * rg;
          into.slopeX[out + i] =
            v0 * rowSlope[a] +
            v1 * rowSlope[b] +
            v2 * rowSlope[d] +
            v3 * rowSlope[e] +
            v4 * rowSlope[f] +
            v5 * rowSlope[g];
        }
      }
    },
  };
}
