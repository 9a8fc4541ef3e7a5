import type { Common } from '../motion/worldTrack.ts';
import type { Air } from '../theory/air.ts';
import type { Arithmetic, Operand } from '../uncertainty/arithmetic.ts';
import { leastSquares } from '../uncertainty/linearSystem.ts';
import type { Measurement } from '../uncertainty/measurement.ts';
import { factorInputs, factorOn } from '../uncertainty/scaledMeasurement.ts';
import { type BallInput, ballInputs, ballOf, lagInAir, type StatedBall } from './ballInputs.ts';
import { fallInAir } from './fallInAir.ts';

export interface BallGravityInput {
  /** Times after the ball's release, heights and their standard uncertainties over the fall that is used. */
  readonly afterS: Float64Array;
  readonly yM: Float64Array;
  readonly uYM: Float64Array;
  /** Standard uncertainty of g from the positions alone and its degrees of freedom, correlation of the positions included. */
  readonly uFitMps2: number;
  readonly dof: number;
  readonly common: Pick<Common, 'length' | 'time' | 'uDownRad'>;
  /** Null: drag and buoyancy are not taken off. */
  readonly ball: StatedBall | null;
  readonly air: Air;
  /** At which what the air takes is worked out; an error of 1 % of it moves g by 1 % of the drag's share. */
  readonly localGMps2: number;
}

/**
 * The measurement of g from a falling ball: heights times the factors of the scale, times times those of the clock, what air
 * takes added back, and a least-squares parabola through them. Its budget is what `propagate` or `monteCarlo` make of it.
 *
 * @throws RangeError (when evaluated) with fewer than three points
 */
export function ballGravity(input: BallGravityInput): Measurement<string, 'gMps2'> {
  const { afterS, yM, uYM, uFitMps2, dof, common, ball, air, localGMps2 } = input;
  const inBall = ball && ballInputs(ball, air);
  const weights = uYM.map((u) => 1 / u ** 2);
  return {
    inputs: {
      ...factorInputs(common),
      positions: { source: 'positions', value: 0, u: uFitMps2, unit: 'm/s2', dof },
      downRad: { source: 'direction of down', value: 0, u: common.uDownRad, unit: 'rad' },
      ...(inBall ?? {}),
    },
    outputs: <T>(m: Arithmetic<T>, x: Readonly<Record<string, T>>) => {
      // A fall along a direction that is off by an angle is seen shorter by its cosine.
      const length = m.divide(factorOn('length', common, m, x), m.cos(x.downRad));
      const stretch = factorOn('time', common, m, x);
      let heights: Operand<T>[] = Array.from(yM, (y) => m.multiply(y, length));
      if (ball) {
        const inAir = ballOf(x as Readonly<Record<BallInput, T>>, localGMps2, ball.dragCoefficient);
        const lag = lagInAir(m, fallInAir(m, afterS, stretch, inAir), afterS, stretch, localGMps2);
        heights = heights.map((y, i) => m.add(y, lag[i]));
      }
      const design = Array.from(afterS, (t) => [1, t, t * t]);
      const [, , curvature] = leastSquares(m, design, heights, weights);
      // The parabola was fitted in the clock's own time: seconds are that times the stretch.
      const gMps2 = m.divide(m.multiply(-2, curvature), m.power(stretch, 2));
      return { gMps2: m.add(gMps2, x.positions) };
    },
  };
}
