import { inflation } from '../motion/residuals.ts';
import type { Air } from '../theory/air.ts';
import { plainNumbers } from '../uncertainty/arithmetic.ts';
import { leastSquares } from '../uncertainty/linearSystem.ts';
import { type BallInput, ballInputs, ballOf, lagInAir, type StatedBall } from './ballInputs.ts';
import { fallInAir } from './fallInAir.ts';

export interface PitchFromFallInput {
  /** Times after release [s] over the fall that is used. */
  readonly afterS: Float64Array;
  /** Standard uncertainties of the heights [m]. */
  readonly uYM: Float64Array;
  /** Heights as they are with the camera looking down by an angle [rad], the scale bar put right for it. */
  heightsAt(pitchRad: number): Float64Array;
  /** Drag is taken as known: pitch and drag leave the same mark. */
  readonly ball: StatedBall;
  readonly air: Air;
  readonly localGMps2: number;
}

export interface PitchFromFall {
  readonly pitchRad: number;
  /** From the positions and the uncertainty of the drag. */
  readonly uPitchRad: number;
  readonly gMps2: number;
  /** From the positions alone, pitch unknown. */
  readonly uGMps2: number;
  readonly dof: number;
}

const leastPoints = 20;
/** Half-width of the differences by which the heights' change with pitch is had [rad]. */
const stepRad = 1e-3;
const settledRad = 1e-9;
/** A rig that is farther out of level shows it. */
const largestRad = 0.35;

/**
 * The camera's pitch from the free fall itself: it bends the fall by terms of the third and fourth power of time, which gravity
 * does not have. First place, first speed, g and pitch by least squares, the drag held.
 *
 * @returns null with fewer than 20 points, or where the fall leads to no pitch of a rig
 */
export function pitchFromFall(input: PitchFromFallInput): PitchFromFall | null {
  const { afterS, ball, air } = input;
  if (afterS.length < leastPoints) return null;
  const inputs = ballInputs(ball, air);
  const values = Object.fromEntries(Object.entries(inputs).map(([k, q]) => [k, q.value]));
  const found = fitted(input, lagOf(input, values));
  if (!found) return null;
  const dragged = fitted(input, lagOf(input, { ...values, dragShare: 1 + inputs.dragShare.u }));
  const byDrag = dragged ? dragged.pitchRad - found.pitchRad : 0;
  return { ...found, uPitchRad: Math.hypot(found.uPitchRad, byDrag) };
}

/** What the air takes from the fall at each time, negative [m]. */
function lagOf(
  { afterS, ball, localGMps2 }: PitchFromFallInput,
  values: Readonly<Record<string, number>>,
): number[] {
  const inAir = ballOf(values as Readonly<Record<BallInput, number>>, localGMps2, ball.dragCoefficient);
  const drops = fallInAir(plainNumbers, afterS, 1, inAir);
  return lagInAir(plainNumbers, drops, afterS, 1, localGMps2);
}

function fitted(
  { afterS, uYM, heightsAt }: PitchFromFallInput,
  lag: readonly number[],
): PitchFromFall | null {
  const weights = Float64Array.from(uYM, (u) => 1 / u ** 2);
  const n = afterS.length;
  let pitchRad = 0;
  for (let round = 0; round < 20; round++) {
    const y = heightsAt(pitchRad).map((h, i) => h + lag[i]);
    const [low, high] = [heightsAt(pitchRad - stepRad), heightsAt(pitchRad + stepRad)];
    const turned = high.map((h, i) => (h - low[i]) / (2 * stepRad));
    const parabola = Array.from(afterS, (t) => [1, t, t * t]);
    const design = parabola.map((row, i) => [...row, -turned[i]]);
    const solution = leastSquares(plainNumbers, design, [...y], weights);
    pitchRad += solution[3];
    if (!(Math.abs(pitchRad) < largestRad)) return null;
    if (Math.abs(solution[3]) > settledRad) continue;
    const standardised = y.map((h, i) => {
      const model = design[i].reduce((s, d, k) => s + d * solution[k], 0);
      return ((h - model) * Math.sqrt(weights[i])) / Math.sqrt(1 - 4 / n);
    });
    const wider = inflation(standardised, 0, n);
    const own = (column: number) => 1 / Math.sqrt(ownSquares(design, column, weights));
    return {
      pitchRad,
      uPitchRad: wider * own(3),
      gMps2: -2 * solution[2],
      uGMps2: 2 * wider * own(2),
      dof: n - 4,
    };
  }
  return null;
}

/** Weighted squares of what a column does not share with the others: one over the variance of its coefficient. */
function ownSquares(design: readonly (readonly number[])[], column: number, weights: Float64Array): number {
  const others = design.map((row) => row.filter((_, k) => k !== column));
  const shared = leastSquares(
    plainNumbers,
    others,
    design.map((row) => row[column]),
    weights,
  );
  return design.reduce(
    (s, row, i) => s + weights[i] * (row[column] - others[i].reduce((t, o, k) => t + o * shared[k], 0)) ** 2,
    0,
  );
}
