import type { Piece } from '../method.ts';
import { medianStepS } from './evenTimes.ts';
import { type IntegratedWalk, integratedWalk } from './integratedWalk.ts';
import type { Derivatives, LinearSmoother } from './linearSmoother.ts';
import type { MethodWithSettings, PrescribedMethod } from './prescribedMethod.ts';

const leastPoints = 6;
/** Bandwidths tried first: from so many periods in the piece up to half the frame rate. */
const leastPeriods = 0.25;
const tried = 25;
const goldenSteps = 14;
/** Step of the numerical derivative with respect to the weight of the data; its square is the relative error. */
const weightStep = 0.02;

/**
 * Smoothing spline of degree 5, natural at its ends, its smoothness by generalised cross-validation (Craven & Wahba, Numer. Math. 31
 * (1979) 377; for motion data Woltring, Adv. Eng. Software 8 (1986) 104), by the equivalent state-space form, O(n).
 */
export const quinticSpline: PrescribedMethod = {
  name: 'quinticSpline',
  with(settings): MethodWithSettings | null {
    if (settings.method !== 'quinticSpline') return null;
    return {
      description: 'quintic smoothing spline by generalised cross-validation',
      rateProblem: () => null,
      needsEvenTimes: false,
      smoother: (piece) => (piece.timeS.length < leastPoints ? null : splineSmoother(piece)),
    };
  },
};

function splineSmoother({ timeS, valueM, uM }: Piece): LinearSmoother {
  const stepS = medianStepS(timeS);
  const n = timeS.length;
  // In units of a median step and of the median uncertainty all figures are near 1.
  const time = timeS.map((t) => (t - timeS[0]) / stepS);
  const uTypical = uM.slice().sort()[n >> 1];
  const u = uM.map((v) => v / uTypical);
  const curve = (values: Float64Array, q: number, weight = 1): IntegratedWalk => {
    const level = values[0];
    const scaled = values.map((v) => (v - level) / uTypical);
    const widened = weight === 1 ? u : u.map((v) => v / Math.sqrt(weight));
    return integratedWalk(time, scaled, widened, q);
  };
  const densityFor = (bandwidthPerStep: number) => (2 * Math.PI * bandwidthPerStep) ** 6 / (Math.SQRT2 - 1);
  const score = (logBandwidth: number): number => {
    const walk = curve(valueM, densityFor(Math.exp(logBandwidth)));
    const level = valueM[0];
    let squares = 0;
    let trace = 0;
    for (let i = 0; i < n; i++) {
      squares += ((valueM[i] - level) / uTypical - walk.position[i]) ** 2 / u[i] ** 2;
      trace += walk.variancePosition[i] / u[i] ** 2;
    }
    return (n * squares) / (n - trace) ** 2;
  };
  const chosen = Math.exp(leastScore(score, Math.log(leastPeriods / time[n - 1]), Math.log(0.5)));
  const q = densityFor(chosen);

  const back = (walk: IntegratedWalk, level: number): Derivatives => ({
    position: walk.position.map((v) => v * uTypical + level),
    velocity: walk.velocity.map((v) => (v * uTypical) / stepS),
    acceleration: walk.acceleration.map((v) => (v * uTypical) / stepS ** 2),
    jerk: null,
  });
  const uOf = noiseOf(curve(valueM, q, 1 - weightStep), curve(valueM, q, 1 + weightStep));
  return {
    apply: (values) => back(curve(values, q), values[0]),
    uNoise: {
      position: uOf.position.map((v) => v * uTypical),
      velocity: uOf.velocity.map((v) => (v * uTypical) / stepS),
      acceleration: uOf.acceleration.map((v) => (v * uTypical) / stepS ** 2),
      jerk: null,
    },
    // A wave passes with 1/(1 + u² Δt ω⁶/q): 3 dB where that is 1/√2; with the local step and uncertainty.
    bandwidthHz: timeS.map((_, i) => {
      const local =
        u[i] ** 2 *
        ((time[Math.min(n - 1, i + 1)] - time[Math.max(0, i - 1)]) / (i > 0 && i < n - 1 ? 2 : 1));
      return Math.min(0.5, (((Math.SQRT2 - 1) * q) / local) ** (1 / 6) / (2 * Math.PI)) / stepS;
    }),
    settings: {
      smoothness: 'generalised cross-validation',
      /** Density of the third derivative against the variance of a position: what cross-validation chose. */
      jerkDensityPerVariance: q / stepS ** 5,
    },
  };
}

/**
 * Variance of the noise alone. With C(α) = (αW + S)⁻¹ the covariance given the data when their weights are α W, the weighted sums
 * of the data have the covariance C W C, which is -dC/dα.
 */
function noiseOf(less: IntegratedWalk, more: IntegratedWalk) {
  const root = (a: Float64Array, b: Float64Array) =>
    a.map((v, i) => Math.sqrt(Math.max(0, v - b[i]) / (2 * weightStep)));
  return {
    position: root(less.variancePosition, more.variancePosition),
    velocity: root(less.varianceVelocity, more.varianceVelocity),
    acceleration: root(less.varianceAcceleration, more.varianceAcceleration),
  };
}

/** Least of a function that may have several minima: a ladder, then golden sections about its best. */
function leastScore(of: (x: number) => number, from: number, to: number): number {
  const step = (to - from) / (tried - 1);
  const scores = Array.from({ length: tried }, (_, k) => of(from + k * step));
  const best = scores.indexOf(Math.min(...scores));
  let low = from + Math.max(0, best - 1) * step;
  let high = from + Math.min(tried - 1, best + 1) * step;
  const golden = (Math.sqrt(5) - 1) / 2;
  let left = high - golden * (high - low);
  let right = low + golden * (high - low);
  let atLeft = of(left);
  let atRight = of(right);
  for (let k = 0; k < goldenSteps; k++) {
    if (atLeft < atRight) {
      [high, right, atRight] = [right, left, atLeft];
      left = high - golden * (high - low);
      atLeft = of(left);
    } else {
      [low, left, atLeft] = [left, right, atRight];
      right = low + golden * (high - low);
      atRight = of(right);
    }
  }
  return (low + high) / 2;
}
