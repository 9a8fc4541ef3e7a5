import { inverse } from './polynomialFit.ts';
import { inflation } from './residuals.ts';
import type { WorldTrack } from './worldTrack.ts';

/** The instant a body is let go, from its track. */
export interface Release {
  readonly timeS: number;
  readonly uTimeS: number;
  /** Height before release [m] and its standard uncertainty from tracking. */
  readonly yM: number;
  readonly uYM: number;
  /** Frames at rest before it. 0: the instant is extrapolated, on the assumption that the body started from rest. */
  readonly restFrames: number;
}

/** A body has left its place when it is lower by this many standard uncertainties, and by this much [m]. */
const leftSigma = 8;
const leftM = 0.0003;
/** The fit goes on until the body has fallen this far [m]: enough to be far above the noise, little enough for a short series. */
const fitDropM = 0.03;
const leastFallingPoints = 6;
const mostSteps = 50;

/**
 * Release by least squares of y = y0 - a τ²/2 - c τ⁴, τ = t - t0 after release and 0 before: y0, a, t0 free, and for a tether's
 * tip c, since the fold pulls it down ever more (energy form: a = g(1 + x/L + …), so c > 0).
 *
 * @returns null when the body never leaves its place, or with a reason when there are too few points to tell
 */
export function releaseOf(track: WorldTrack): Release | null {
  const { timeS, yM, uYM } = track;
  const n = timeS.length;
  if (n < leastFallingPoints + 2) return null;
  const start = restLevel(yM, uYM);
  const gone = yM.findIndex((y) => start.yM - y > Math.max(leftM, leftSigma * start.uPointM));
  if (gone < 0) return null;
  let to = yM.findIndex((y, i) => i > gone && start.yM - y > fitDropM);
  if (to < 0) to = n;
  to = Math.min(n, Math.max(to, gone + leastFallingPoints));
  const free = track.role === 'tip' ? 4 : 3;
  if (to < free + 2) return null;

  // First guess: uniform acceleration of about g from rest up to where it was seen to have left.
  let y0 = start.yM;
  let a = 9.8;
  let c = 0;
  let t0 = timeS[gone] - Math.sqrt((2 * Math.max(start.yM - yM[gone], 0)) / a);
  let fit: { covariance: Float64Array } | null = null;
  for (let step = 0; step < mostSteps; step++) {
    const normal = new Float64Array(free * free);
    const right = new Float64Array(free);
    for (let i = 0; i < to; i++) {
      const tau = Math.max(0, timeS[i] - t0);
      const w = 1 / uYM[i] ** 2;
      const r = yM[i] - (y0 - 0.5 * a * tau * tau - c * tau ** 4);
      const j = [1, -0.5 * tau * tau, a * tau + 4 * c * tau ** 3, -(tau ** 4)];
      for (let p = 0; p < free; p++) {
        right[p] += w * j[p] * r;
        for (let q = 0; q < free; q++) normal[p * free + q] += w * j[p] * j[q];
      }
    }
    const covariance = scaledInverse(normal, free);
    if (!covariance) return null;
    const change = Array.from({ length: free }, (_, p) =>
      right.reduce((s, v, q) => s + covariance[p * free + q] * v, 0),
    );
    y0 += change[0];
    a += change[1];
    t0 += Math.max(-0.05, Math.min(0.05, change[2]));
    if (free === 4) c += change[3];
    fit = { covariance };
    if (Math.abs(change[2]) < 1e-9) break;
  }
  if (!fit || !Number.isFinite(t0) || a <= 0) return null;

  const standardised = new Float64Array(to);
  for (let i = 0; i < to; i++) {
    const tau = Math.max(0, timeS[i] - t0);
    standardised[i] = (yM[i] - (y0 - 0.5 * a * tau * tau - c * tau ** 4)) / uYM[i];
  }
  const wider = inflation(standardised, 0, to);
  return {
    timeS: t0,
    uTimeS: wider * Math.sqrt(fit.covariance[2 * free + 2]),
    yM: y0,
    uYM: wider * Math.sqrt(fit.covariance[0]),
    restFrames: timeS.filter((t) => t <= t0).length,
  };
}

/** Level at the start: median of the first points, with their scatter. */
function restLevel(yM: Float64Array, uYM: Float64Array): { yM: number; uPointM: number } {
  const few = Math.min(5, yM.length);
  const sorted = [...yM.slice(0, few)].sort((p, q) => p - q);
  const middle = sorted[few >> 1];
  return { yM: middle, uPointM: Math.max(...uYM.slice(0, few)) };
}

/** Inverse after scaling to unit diagonal: the parameters differ by many powers of ten. */
export function scaledInverse(matrix: Float64Array, n: number): Float64Array | null {
  const scale = Array.from({ length: n }, (_, i) => 1 / Math.sqrt(matrix[i * n + i]));
  if (scale.some((s) => !Number.isFinite(s))) return null;
  const unit = matrix.map((v, k) => v * scale[Math.floor(k / n)] * scale[k % n]);
  return inverse(unit, n)?.map((v, k) => v * scale[Math.floor(k / n)] * scale[k % n]) ?? null;
}
