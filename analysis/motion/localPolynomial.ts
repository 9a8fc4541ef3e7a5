import { polynomialFit } from './polynomialFit.ts';

/** Half a nanosecond: windows of whole frame times must not depend on rounding. */
const slackS = 5e-10;

/** Derivatives at each of the given times, with standard uncertainties; NaN where too few points fall in the window. */
export interface Derivatives {
  readonly position: Float64Array;
  readonly velocity: Float64Array;
  readonly acceleration: Float64Array;
  readonly uPosition: Float64Array;
  readonly uVelocity: Float64Array;
  readonly uAcceleration: Float64Array;
}

/** A run of points that no break parts: from (inclusive) to (exclusive). */
export interface Segment {
  readonly from: number;
  readonly to: number;
}

/**
 * Position, velocity and acceleration by a local polynomial: at each point a weighted least-squares polynomial through its
 * neighbours within the half-window, and its derivatives there. At the ends of the segment the window is one-sided.
 *
 * @param timeS        n times, strictly increasing [s]
 * @param yM           n positions [m] with standard uncertainties uYM [m]
 * @param halfWindowS  half-window [s]
 * @param segment      nothing outside is used
 * @param at           points of the segment at which it is evaluated, ascending; default all
 * @returns n values each, NaN elsewhere and where too few points fall in the window
 * @throws RangeError if lengths differ or times do not increase
 * Savitzky & Golay 1964 on even times; weights and covariance after Fan & Gijbels 1996, ch. 3. Cost O(points · window · degree).
 */
export function localPolynomial(
  timeS: Float64Array,
  yM: Float64Array,
  uYM: Float64Array,
  halfWindowS: number,
  degree: number,
  segment: Segment = { from: 0, to: timeS.length },
  at?: Int32Array,
): Derivatives {
  const n = timeS.length;
  if (yM.length !== n || uYM.length !== n) throw new RangeError('localPolynomial: lengths differ');
  const { from, to } = segment;
  for (let i = from + 1; i < to; i++) {
    if (!(timeS[i] > timeS[i - 1])) throw new RangeError(`localPolynomial: times do not increase at ${i}`);
  }
  const blank = () => new Float64Array(n).fill(Number.NaN);
  const out: Derivatives = {
    position: blank(),
    velocity: blank(),
    acceleration: blank(),
    uPosition: blank(),
    uVelocity: blank(),
    uAcceleration: blank(),
  };
  const points = at ?? Int32Array.from({ length: to - from }, (_, k) => from + k);
  const terms = degree + 1;
  let a = from;
  let b = from;
  for (const i of points) {
    while (timeS[i] - timeS[a] > halfWindowS + slackS) a++;
    while (b < to && timeS[b] - timeS[i] <= halfWindowS + slackS) b++;
    const span = Math.max(timeS[i] - timeS[a], timeS[b - 1] - timeS[i]);
    const fit = span > 0 ? polynomialFit(timeS, yM, uYM, a, b, timeS[i], span, degree) : null;
    if (!fit) continue;
    const { coefficients: c, covariance: v } = fit;
    out.position[i] = c[0];
    out.uPosition[i] = Math.sqrt(v[0]);
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
