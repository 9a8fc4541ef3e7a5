import { forwardAndBackward, type LowPass } from './lowPass.ts';
import { polynomialWindow } from './polynomialWindow.ts';
import { type Row, weightedSum } from './rows.ts';

/** Fewest points from which end slopes are taken. */
export const leastPoints = 8;
/** The slope at an end is that of a cubic through so many periods of the corner frequency. */
const slopePeriods = 1;
/** The filter's memory is taken as faded, to 1e-8, after so many of its time constants. */
const faded = 18;

/** Weights of the positions for the slope at the first and at the last of them [1/s]. */
export interface EndSlopes {
  readonly start: Row;
  readonly end: Row;
}

/** Values through both runs, without the parabola of the end slopes. */
export interface Levelled {
  /** padded + n + padded values. */
  readonly filtered: Float64Array;
  readonly padded: number;
  readonly level: number;
  readonly startSlope: number;
  readonly endSlope: number;
}

/** Time constant of one run in frames. */
export function fadeFrames(cornerHz: number, stepS: number): number {
  return Math.SQRT2 / (2 * Math.PI * cornerHz * stepS);
}

export function endSlopes(n: number, stepS: number, cornerHz: number): EndSlopes {
  const count = Math.min(n, Math.max(leastPoints, Math.ceil(slopePeriods / (cornerHz * stepS)) + 1));
  const window = polynomialWindow(
    Float64Array.from({ length: count }, (_, k) => k * stepS),
    3,
  );
  if (!window) throw new RangeError('endSlopes: a cubic through fewer than four points');
  return {
    start: { from: 0, weights: window.weights(0, 1) },
    end: { from: n - count, weights: window.weights((count - 1) * stepS, 1) },
  };
}

/**
 * Both runs over values at even times. Filters need values beyond the ends, and mirroring is right only where the slope is zero:
 * so a parabola with the slopes of both ends is taken off first. The acceleration then goes on level beyond the ends.
 */
export function filterLevelled(
  values: Float64Array,
  filter: LowPass,
  cornerHz: number,
  stepS: number,
): Levelled {
  const n = values.length;
  const level = values[0];
  const lifted = values.map((v) => v - level);
  const slopes = endSlopes(n, stepS, cornerHz);
  const startSlope = weightedSum(slopes.start, lifted);
  const endSlope = weightedSum(slopes.end, lifted);
  const rest = lifted.map(
    (v, i) => v - startSlope * startParabola(i, n, stepS)[0] - endSlope * endParabola(i, n, stepS)[0],
  );
  const padded = Math.max(2, Math.ceil(faded * fadeFrames(cornerHz, stepS)));
  return { filtered: forwardAndBackward(rest, filter, padded), padded, level, startSlope, endSlope };
}

/** Parabola of slope 1 at the first point and 0 at the last, with its three derivatives. */
export function startParabola(
  i: number,
  n: number,
  stepS: number,
): readonly [number, number, number, number] {
  const t = i * stepS;
  const whole = (n - 1) * stepS;
  return [t - (t * t) / (2 * whole), 1 - t / whole, -1 / whole, 0];
}

/** Parabola of slope 0 at the first point and 1 at the last, with its three derivatives. */
export function endParabola(i: number, n: number, stepS: number): readonly [number, number, number, number] {
  const t = i * stepS;
  const whole = (n - 1) * stepS;
  return [(t * t) / (2 * whole), t / whole, 1 / whole, 0];
}
