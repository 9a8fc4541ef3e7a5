import { localPolynomial } from './localPolynomial.ts';

/** Windows chosen at each point, and what the choice costs in bias. */
export interface ChosenWindows {
  readonly halfWindowS: Float64Array;
  /** Estimated bias of acceleration, velocity and position there (a standard uncertainty, not a correction). */
  readonly biasAcceleration: Float64Array;
  readonly biasVelocity: Float64Array;
  readonly biasPosition: Float64Array;
}

/** Ratio of one window of the ladder to the next. */
const rung = 1.35;
/** Points over which the estimated squared bias is averaged, as a share of the half-window. */
const smoothing = 0.5;

/**
 * Half-window at each point of a segment: of a ladder of windows the one with the least estimated mean squared error of the
 * acceleration. The squared bias is that of the difference to the fit two degrees higher with the same window, less the
 * variance of that difference, averaged over neighbouring points (a single difference is too noisy to choose by: shared
 * limits, section B, on choices from intervals).
 *
 * @param degree  degree of the local polynomial, even
 */
export function chooseWindows(
  timeS: Float64Array,
  yM: Float64Array,
  uYM: Float64Array,
  degree: number,
  segment: { readonly from: number; readonly to: number },
): ChosenWindows {
  const n = timeS.length;
  const { from, to } = segment;
  const blank = () => new Float64Array(n).fill(Number.NaN);
  const chosen = {
    halfWindowS: blank(),
    biasAcceleration: blank(),
    biasVelocity: blank(),
    biasPosition: blank(),
  };
  const best = new Float64Array(n).fill(Number.POSITIVE_INFINITY);

  for (const halfS of ladder(timeS, degree, segment)) {
    const widths = new Float64Array(n).fill(halfS);
    const low = localPolynomial(timeS, yM, uYM, widths, degree, segment);
    const high = localPolynomial(timeS, yM, uYM, widths, degree + 2, segment);
    const reachS = smoothing * halfS;
    const bias2 = (lowV: Float64Array, highV: Float64Array, uLow: Float64Array, uHigh: Float64Array) => {
      const raw = blank();
      for (let i = from; i < to; i++) {
        // Variance of the difference of nested least-squares fits is the difference of their variances.
        raw[i] = (lowV[i] - highV[i]) ** 2 - (uHigh[i] ** 2 - uLow[i] ** 2);
      }
      return averaged(timeS, raw, reachS, segment);
    };
    const a2 = bias2(low.acceleration, high.acceleration, low.uAcceleration, high.uAcceleration);
    const v2 = bias2(low.velocity, high.velocity, low.uVelocity, high.uVelocity);
    const p2 = bias2(low.position, high.position, low.uPosition, high.uPosition);
    for (let i = from; i < to; i++) {
      const score = Math.max(0, a2[i]) + low.uAcceleration[i] ** 2;
      if (score < best[i]) {
        best[i] = score;
        chosen.halfWindowS[i] = halfS;
        chosen.biasAcceleration[i] = Math.sqrt(Math.max(0, a2[i]));
        chosen.biasVelocity[i] = Math.sqrt(Math.max(0, v2[i]));
        chosen.biasPosition[i] = Math.sqrt(Math.max(0, p2[i]));
      }
    }
  }
  return chosen;
}

/** Half-windows from the smallest that the higher degree can be fitted in at the ends, up to the whole segment. */
function ladder(timeS: Float64Array, degree: number, { from, to }: { from: number; to: number }): number[] {
  const lengthS = timeS[to - 1] - timeS[from];
  const stepS = lengthS / Math.max(1, to - 1 - from);
  const windows: number[] = [];
  for (let halfS = (degree + 3) * stepS; halfS < lengthS * rung; halfS *= rung) windows.push(halfS);
  return windows;
}

function averaged(
  timeS: Float64Array,
  values: Float64Array,
  reachS: number,
  { from, to }: { from: number; to: number },
): Float64Array {
  const out = new Float64Array(values.length).fill(Number.NaN);
  const sums = new Float64Array(to - from + 1);
  const counts = new Float64Array(to - from + 1);
  for (let i = from; i < to; i++) {
    const ok = Number.isFinite(values[i]);
    sums[i - from + 1] = sums[i - from] + (ok ? values[i] : 0);
    counts[i - from + 1] = counts[i - from] + (ok ? 1 : 0);
  }
  let a = from;
  let b = from;
  for (let i = from; i < to; i++) {
    while (timeS[i] - timeS[a] > reachS) a++;
    while (b < to && timeS[b] - timeS[i] <= reachS) b++;
    const count = counts[b - from] - counts[a - from];
    if (count > 0) out[i] = (sums[b - from] - sums[a - from]) / count;
  }
  return out;
}
