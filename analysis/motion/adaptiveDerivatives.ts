import { type Derivatives, localPolynomial, type Segment } from './localPolynomial.ts';

/** One of the three quantities, point by point, with the window it was estimated in. */
export interface Estimate {
  readonly value: Float64Array;
  /** Standard uncertainty from the noise of the positions. */
  readonly uNoise: Float64Array;
  /** Estimated bias of smoothing, as a standard uncertainty. */
  readonly uBias: Float64Array;
  readonly halfWindowS: Float64Array;
  readonly degree: Float64Array;
}

export interface AdaptiveDerivatives {
  readonly position: Estimate;
  readonly velocity: Estimate;
  readonly acceleration: Estimate;
  /** Weight of a point's own value in its smoothed position. */
  readonly leverage: Float64Array;
}

const degrees = [2, 4];
/** Ratio of one window of the ladder to the next. */
const rung = 1.35;
/** A window is evaluated at every point up to so many points to a side, beyond at every part of its own width. */
const evaluatedPerHalfWindow = 12;
/** Points over which the estimated squared bias is averaged, as a share of the half-window. */
const smoothing = 0.5;

/**
 * Position, velocity and acceleration of one segment, each with its own window at each instant: of local polynomials of
 * degree 2 and 4 in a ladder of windows the one with the least estimated mean squared error.
 *
 * The squared bias of a fit is taken from its difference to the fit two degrees higher with the same window, less the
 * variance of that difference (for nested least squares the difference of the variances), averaged over neighbouring points:
 * a single difference is too noisy to choose by (shared limits, section B, on choices from intervals).
 *
 * Cost O(n · rungs · degree²), whatever the windows: wide windows are evaluated at fewer points and interpolated between.
 */
export function adaptiveDerivatives(
  timeS: Float64Array,
  yM: Float64Array,
  uYM: Float64Array,
  segment: Segment,
): AdaptiveDerivatives {
  const n = timeS.length;
  const blank = () => new Float64Array(n).fill(Number.NaN);
  const estimate = (): Estimate => ({
    value: blank(),
    uNoise: blank(),
    uBias: blank(),
    halfWindowS: blank(),
    degree: blank(),
  });
  const chosen = { position: estimate(), velocity: estimate(), acceleration: estimate(), leverage: blank() };
  const least = { position: blank(), velocity: blank(), acceleration: blank() };

  for (const degree of degrees) {
    for (const { halfS, stride } of ladder(timeS, degree, segment)) {
      const at = evaluationPoints(segment, stride);
      const low = localPolynomial(timeS, yM, uYM, halfS, degree, segment, at);
      const high = localPolynomial(timeS, yM, uYM, halfS, degree + 2, segment, at);
      const adequate = adequacy(timeS, yM, uYM, high, halfS, at);
      for (const quantity of ['position', 'velocity', 'acceleration'] as const) {
        const bias2 = squaredBias(
          timeS,
          low[quantity],
          high[quantity],
          uOf(low, quantity),
          uOf(high, quantity),
          halfS,
          at,
        );
        const into = chosen[quantity];
        forEachBetween(timeS, at, low[quantity], uOf(low, quantity), bias2, (i, k, value, u, b2) => {
          const ok = adequate[k] && adequate[Math.min(k + 1, at.length - 1)];
          // Where no window is adequate the narrowest stands, its bias as large as the value itself.
          const score = ok ? b2 + u * u : lastResort * halfS;
          if (!(score < least[quantity][i]) && !Number.isNaN(least[quantity][i])) return;
          if (!Number.isFinite(score)) return;
          least[quantity][i] = score;
          into.value[i] = value;
          into.uNoise[i] = u;
          into.uBias[i] = ok ? Math.sqrt(b2) : Math.max(Math.sqrt(b2), Math.abs(value));
          into.halfWindowS[i] = halfS;
          into.degree[i] = degree;
        });
      }
    }
  }
  for (let i = segment.from; i < segment.to; i++)
    chosen.leverage[i] = (chosen.position.uNoise[i] / uYM[i]) ** 2;
  return chosen;
}

function uOf(d: Derivatives, quantity: 'position' | 'velocity' | 'acceleration'): Float64Array {
  return quantity === 'position' ? d.uPosition : quantity === 'velocity' ? d.uVelocity : d.uAcceleration;
}

/** Half-windows from the least in which the higher degree can be told from the lower, up to the whole segment. */
function ladder(
  timeS: Float64Array,
  degree: number,
  { from, to }: Segment,
): { halfS: number; stride: number }[] {
  const lengthS = timeS[to - 1] - timeS[from];
  const stepS = lengthS / Math.max(1, to - 1 - from);
  const rungs: { halfS: number; stride: number }[] = [];
  for (
    let points = degree / 2 + 2;
    points * stepS < lengthS * rung;
    points = Math.max(points + 1, Math.round(points * rung))
  ) {
    rungs.push({ halfS: points * stepS, stride: Math.max(1, Math.floor(points / evaluatedPerHalfWindow)) });
  }
  return rungs;
}

function evaluationPoints({ from, to }: Segment, stride: number): Int32Array {
  const at: number[] = [];
  for (let i = from; i < to; i += stride) at.push(i);
  if (at[at.length - 1] !== to - 1) at.push(to - 1);
  return Int32Array.from(at);
}

/** Score, per second of half-window, of a window that is not adequate: more than any that is. */
const lastResort = 1e30;

/** Mean squared standardised residual beyond which a fit plainly does not follow the points. */
const mostResidual = 4;

/**
 * Whether the higher fit follows the points about each evaluated one: where not even that does, its difference to the lower
 * says nothing of the bias, and the window is too wide.
 */
function adequacy(
  timeS: Float64Array,
  yM: Float64Array,
  uYM: Float64Array,
  high: Derivatives,
  halfS: number,
  at: Int32Array,
): boolean[] {
  const squares = Float64Array.from(at, (i) => ((yM[i] - high.position[i]) / uYM[i]) ** 2);
  const near = averaged(timeS, squares, (smoothing / 4) * halfS, at);
  return Array.from(near, (z2) => !(z2 > mostResidual));
}

function squaredBias(
  timeS: Float64Array,
  low: Float64Array,
  high: Float64Array,
  uLow: Float64Array,
  uHigh: Float64Array,
  halfS: number,
  at: Int32Array,
): Float64Array {
  const raw = Float64Array.from(at, (i) => (low[i] - high[i]) ** 2 - (uHigh[i] ** 2 - uLow[i] ** 2));
  const wide = averaged(timeS, raw, smoothing * halfS, at);
  const narrow = averaged(timeS, raw, (smoothing / 4) * halfS, at);
  // Towards a steep end the bias grows within the window: the narrower mean must not be hidden by the wider.
  return raw.map((_, k) => Math.max(0, wide[k], narrow[k]));
}

function averaged(timeS: Float64Array, values: Float64Array, reachS: number, at: Int32Array): Float64Array {
  const out = new Float64Array(values.length);
  let a = 0;
  let b = 0;
  let sum = 0;
  let count = 0;
  for (let k = 0; k < at.length; k++) {
    while (b < at.length && timeS[at[b]] - timeS[at[k]] <= reachS) {
      if (Number.isFinite(values[b])) {
        sum += values[b];
        count++;
      }
      b++;
    }
    while (timeS[at[k]] - timeS[at[a]] > reachS) {
      if (Number.isFinite(values[a])) {
        sum -= values[a];
        count--;
      }
      a++;
    }
    out[k] = count > 0 && Number.isFinite(values[k]) ? sum / count : Number.NaN;
  }
  return out;
}

/** Calls back for every point of the segment, values between evaluated points interpolated along time. */
function forEachBetween(
  timeS: Float64Array,
  at: Int32Array,
  value: Float64Array,
  u: Float64Array,
  bias2: Float64Array,
  call: (i: number, k: number, value: number, u: number, bias2: number) => void,
): void {
  for (let k = 0; k < at.length; k++) {
    const i = at[k];
    call(i, k, value[i], u[i], bias2[k]);
    const next = at[k + 1];
    for (let j = i + 1; j < next; j++) {
      const share = (timeS[j] - timeS[i]) / (timeS[next] - timeS[i]);
      const between = (p: number, q: number) => p + share * (q - p);
      call(j, k, between(value[i], value[next]), between(u[i], u[next]), between(bias2[k], bias2[k + 1]));
    }
  }
}
