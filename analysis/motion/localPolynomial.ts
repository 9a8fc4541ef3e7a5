import { polynomialFit } from './polynomialFit.ts';

/** Derivatives at each of the given times, with standard uncertainties; NaN where too few points fall in the window. */
export interface Derivatives {
  readonly position: Float64Array;
  readonly velocity: Float64Array;
  readonly acceleration: Float64Array;
  readonly uPosition: Float64Array;
  readonly uVelocity: Float64Array;
  readonly uAcceleration: Float64Array;
  /** Weight of a point's own value in its smoothed value, 0 … 1. */
  readonly leverage: Float64Array;
}

/** The windows of a segment: for each point the first and (exclusive) last index that counts. */
export function windowOf(
  timeS: Float64Array,
  i: number,
  halfWindowS: number,
  from: number,
  to: number,
): [number, number] {
  // Half a nanosecond of slack: windows of whole frame times must not depend on rounding.
  const slack = 5e-10;
  let a = i;
  let b = i + 1;
  while (a > from && timeS[i] - timeS[a - 1] <= halfWindowS + slack) a--;
  while (b < to && timeS[b] - timeS[i] <= halfWindowS + slack) b++;
  return [a, b];
}

/**
 * Position, velocity and acceleration by a local polynomial: at each point a weighted least-squares polynomial through its
 * neighbours within the half-window, and its derivatives there. At the ends of the segment the window is one-sided.
 *
 * @param timeS        n times, strictly increasing [s]
 * @param yM           n positions [m] with standard uncertainties uYM [m]
 * @param halfWindowS  half-window at each point [s]
 * @param segment      indices from (inclusive) and to (exclusive); nothing outside is used or written
 * Savitzky & Golay 1964 on even times; weights and covariance after Fan & Gijbels 1996, ch. 3. Cost O(n · window · degree).
 */
export function localPolynomial(
  timeS: Float64Array,
  yM: Float64Array,
  uYM: Float64Array,
  halfWindowS: Float64Array,
  degree: number,
  segment: { readonly from: number; readonly to: number },
): Derivatives {
  const n = timeS.length;
  if (yM.length !== n || uYM.length !== n || halfWindowS.length !== n)
    throw new RangeError('localPolynomial: lengths differ');
  const blank = () => new Float64Array(n).fill(Number.NaN);
  const out: Derivatives = {
    position: blank(),
    velocity: blank(),
    acceleration: blank(),
    uPosition: blank(),
    uVelocity: blank(),
    uAcceleration: blank(),
    leverage: blank(),
  };
  for (let i = segment.from; i < segment.to; i++) {
    if (i > segment.from && !(timeS[i] > timeS[i - 1]))
      throw new RangeError('localPolynomial: times do not increase');
    const [a, b] = windowOf(timeS, i, halfWindowS[i], segment.from, segment.to);
    const span = Math.max(timeS[i] - timeS[a], timeS[b - 1] - timeS[i]);
    const fit = span > 0 ? polynomialFit(timeS, yM, uYM, a, b, timeS[i], span, degree) : null;
    if (!fit) continue;
    const { coefficients: c, covariance: v } = fit;
    const terms = degree + 1;
    out.position[i] = c[0];
    out.uPosition[i] = Math.sqrt(v[0]);
    out.leverage[i] = v[0] / (uYM[i] * uYM[i]);
    if (degree >= 1) {
      out.velocity[i] = c[1] / span;
      out.uVelocity[i] = Math.sqrt(v[terms + 1]) / span;
    }
    if (degree >= 2) {
      out.acceleration[i] = (2 * c[2]) / (span * span);
      out.uAcceleration[i] = (2 * Math.sqrt(v[2 * terms + 2])) / (span * span);
    }
  }
  return out;
}
