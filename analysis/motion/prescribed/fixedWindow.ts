import { areEven } from './evenTimes.ts';
import { type PolynomialWindow, polynomialWindow } from './polynomialWindow.ts';
import type { Row } from './rows.ts';

/** The row of a derivative at each point. */
export type RowAt = (i: number, derivative: number) => Row;

/**
 * A window of so many points about each point, shifted inwards at the ends; all points where there are fewer. On even times rows of
 * the same place in the window are worked out once and shared.
 *
 * @returns null when the window has fewer points than coefficients
 */
export function fixedWindow(timeS: Float64Array, windowFrames: number, degree: number): RowAt | null {
  const n = timeS.length;
  const width = Math.min(windowFrames, n);
  const startOf = (i: number) => Math.max(0, Math.min(n - width, i - (width >> 1)));
  if (width <= degree) return null;
  if (!areEven(timeS)) return unevenWindow(timeS, width, degree, startOf);

  const stepS = (timeS[n - 1] - timeS[0]) / (n - 1);
  const window = polynomialWindow(
    Float64Array.from({ length: width }, (_, k) => k * stepS),
    degree,
  );
  if (!window) return null;
  const known = new Map<number, Float64Array>();
  return (i, derivative) => {
    const from = startOf(i);
    const key = (i - from) * (degree + 1) + derivative;
    let weights = known.get(key);
    if (weights === undefined) {
      weights = window.weights((i - from) * stepS, derivative);
      known.set(key, weights);
    }
    return { from, weights };
  };
}

function unevenWindow(
  timeS: Float64Array,
  width: number,
  degree: number,
  startOf: (i: number) => number,
): RowAt {
  let last: { from: number; window: PolynomialWindow } | null = null;
  return (i, derivative) => {
    const from = startOf(i);
    if (last?.from !== from) {
      const window = polynomialWindow(timeS.slice(from, from + width), degree);
      if (!window) throw new RangeError('fixedWindow: times that do not increase');
      last = { from, window };
    }
    return { from, weights: last.window.weights(timeS[i], derivative) };
  };
}
