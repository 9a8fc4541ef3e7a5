import type { RelativeSource } from '../motion/worldTrack.ts';
import type { Air } from '../theory/air.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';
import { type Arithmetic, plainNumbers } from '../uncertainty/arithmetic.ts';
import type { Contribution } from '../uncertainty/effectiveDof.ts';
import { leastSquares } from '../uncertainty/linearSystem.ts';
import type { InputQuantity, Measurement } from '../uncertainty/measurement.ts';
import { propagate } from '../uncertainty/propagate.ts';
import { factorInputs, factorOn } from '../uncertainty/scaledMeasurement.ts';
import { type BallInput, ballInputs, ballOf, type StatedBall } from './ballInputs.ts';
import { fallInAir } from './fallInAir.ts';

export interface PixelFall {
  /** Times after the ball's release [s] and places along down in the (undistorted) picture [px], over the fall that is used. */
  readonly afterS: Float64Array;
  readonly downPx: Float64Array;
  readonly uPx: Float64Array;
}

export interface ScaleFromGravity {
  readonly metrePerPx: number;
  readonly uRel: number;
  /** Relative to the scale, for the budget of whatever is measured with it. */
  readonly contributions: readonly Contribution[];
  /** Places less the fit [px]. */
  readonly residualsPx: Float64Array;
}

/**
 * Scale where no bar was filmed: the ball falls with local gravity, so what it falls in metres is known and its fall in pixels
 * gives the pixels in a metre. Straight-line motion is left free, so release and first speed need not be known to the
 * millisecond. The gravity check is lost: scale and clock are no longer tested by it, and every error of the clock is in the scale
 * twice.
 *
 * @param time  relative standard uncertainties of time intervals
 * @param ball  null: drag and buoyancy are not taken into account
 * @returns null with fewer than ten points
 */
export function scaleFromGravity(
  fall: PixelFall,
  gravity: LocalGravity,
  ball: StatedBall | null,
  air: Air,
  time: readonly RelativeSource[],
): ScaleFromGravity | null {
  const { afterS, downPx, uPx } = fall;
  const n = afterS.length;
  if (n < leastPoints) return null;
  const weights = uPx.map((u) => 1 / u ** 2);
  const factors = { length: [], time };
  const fitted = <T>(m: Arithmetic<T>, x: Readonly<Record<string, T>>): T[] => {
    const stretch = factorOn('time', factors, m, x);
    const drops = ball
      ? fallInAir(m, afterS, stretch, ballOf(x as Readonly<Record<BallInput, T>>, x.g, ball.dragCoefficient))
      : Array.from(afterS, (t) => m.multiply(0.5, x.g, m.power(m.multiply(t, stretch), 2)));
    const design = Array.from(afterS, (t, i) => [1, t, drops[i]]);
    return leastSquares(m, design, [...downPx], weights);
  };
  const inputs: Record<string, InputQuantity> = {
    g: { source: 'local gravity', value: gravity.gMps2, u: gravity.uGMps2, unit: 'm/s2' },
    ...factorInputs(factors),
    ...(ball ? ballInputs(ball, air) : {}),
  };
  const values = Object.fromEntries(Object.entries(inputs).map(([k, q]) => [k, q.value]));
  const [startPx, pxPerS, pxPerM] = fitted(plainNumbers, values);
  const { positions, residualsPx } = positionsPart(
    fall,
    weights,
    startPx,
    pxPerS,
    pxPerM,
    gravity,
    values,
    ball,
  );

  const measurement: Measurement<string, 'metrePerPx'> = {
    inputs: {
      ...inputs,
      positions: { source: 'positions of the ball', value: 1, u: positions, unit: '1', dof: n - 3 },
    },
    outputs: (m, x) => ({ metrePerPx: m.divide(x.positions, fitted(m, x)[2]) }),
  };
  const { value, u, contributions } = propagate(measurement).outputs.metrePerPx;
  return {
    metrePerPx: value,
    uRel: u / value,
    contributions: contributions.map((c) => ({ ...c, u: c.u / value })),
    residualsPx,
  };
}

const leastPoints = 10;

/** Relative standard uncertainty of the scale from the places alone, widened where they scatter more than stated. */
function positionsPart(
  { afterS, downPx }: PixelFall,
  weights: Float64Array,
  startPx: number,
  pxPerS: number,
  pxPerM: number,
  gravity: LocalGravity,
  values: Readonly<Record<string, number>>,
  ball: StatedBall | null,
): { positions: number; residualsPx: Float64Array } {
  const drops = ball
    ? fallInAir(
        plainNumbers,
        afterS,
        1,
        ballOf(values as Readonly<Record<BallInput, number>>, gravity.gMps2, ball.dragCoefficient),
      )
    : Array.from(afterS, (t) => 0.5 * gravity.gMps2 * t * t);
  const residualsPx = downPx.map((y, i) => y - (startPx + pxPerS * afterS[i] + pxPerM * drops[i]));
  const chiSquared = residualsPx.reduce((sum, r, i) => sum + weights[i] * r * r, 0);
  // Variance of the third coefficient: one over the weighted sum of squares of what its column does not share with the others.
  const share = leastSquares(
    plainNumbers,
    Array.from(afterS, (t) => [1, t]),
    drops,
    weights,
  );
  const own = drops.reduce((sum, d, i) => sum + weights[i] * (d - share[0] - share[1] * afterS[i]) ** 2, 0);
  const birge = Math.sqrt(Math.max(1, chiSquared / (afterS.length - 3)));
  return { positions: birge / Math.sqrt(own) / Math.abs(pxPerM), residualsPx };
}
