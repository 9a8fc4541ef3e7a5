import type { Air } from '../theory/air.ts';
import { uSphereDragRel } from '../theory/sphereDrag.ts';
import type { Arithmetic } from '../uncertainty/arithmetic.ts';
import type { InputQuantity } from '../uncertainty/measurement.ts';
import type { BallInAir } from './fallInAir.ts';

/** The ball as stated. */
export interface StatedBall {
  readonly diameterM: number;
  readonly massKg: number;
  readonly uDiameterM?: number | undefined;
  readonly uMassKg?: number | undefined;
  readonly dragCoefficient?: number | undefined;
  readonly uDragCoefficient?: number | undefined;
}

export type BallInput = 'dragShare' | 'addedMass' | 'densityKgpm3' | 'viscosityPas' | 'diameterM' | 'massKg';

/** Of a ball's diameter and mass where none is stated: a calliper and a kitchen balance on a small ball. */
const uBallRel = 0.005;
/** A sphere in potential flow has 0.5; one that sheds its wake may carry a fifth more or less. */
const addedMassHalfWidth = 0.1;
/** Sutherland's law against measurements of air (US Standard Atmosphere 1976), with the temperature known to five degrees. */
const uViscosityRel = 0.015;

/** What the fall of a ball in air depends on, each with its uncertainty, for a budget. */
export function ballInputs(ball: StatedBall, air: Air): Record<BallInput, InputQuantity> {
  const stated = ball.dragCoefficient;
  const uDragRel =
    stated === undefined ? uSphereDragRel : (ball.uDragCoefficient ?? uSphereDragRel * stated) / stated;
  return {
    dragShare: { source: 'drag of the ball', value: 1, u: uDragRel, unit: '1' },
    addedMass: {
      source: 'added mass',
      value: 0.5,
      u: addedMassHalfWidth / Math.sqrt(3),
      unit: '1',
      distribution: 'rectangular',
    },
    densityKgpm3: {
      source: 'density of the air',
      value: air.densityKgpm3,
      u: air.uDensityRel * air.densityKgpm3,
      unit: 'kg/m3',
    },
    viscosityPas: {
      source: 'viscosity of the air',
      value: air.viscosityPas,
      u: uViscosityRel * air.viscosityPas,
      unit: 'Pa s',
    },
    diameterM: {
      source: 'diameter of the ball',
      value: ball.diameterM,
      u: ball.uDiameterM ?? uBallRel * ball.diameterM,
      unit: 'm',
    },
    massKg: {
      source: 'mass of the ball',
      value: ball.massKg,
      u: ball.uMassKg ?? uBallRel * ball.massKg,
      unit: 'kg',
    },
  };
}

/** The ball of these inputs in the arithmetic of a measurement function. */
export function ballOf<T>(
  x: Readonly<Record<BallInput, T>>,
  gMps2: T | number,
  dragCoefficient: number | undefined,
): BallInAir<T> {
  const { dragShare, addedMass, densityKgpm3, viscosityPas, diameterM, massKg } = x;
  return { gMps2, dragShare, addedMass, densityKgpm3, viscosityPas, diameterM, massKg, dragCoefficient };
}

/** What air takes from a fall: drop less g t²/2, negative, at each time after release [m]. */
export function lagInAir<T>(
  m: Arithmetic<T>,
  drops: readonly T[],
  afterS: ArrayLike<number>,
  stretch: T,
  gMps2: T | number,
): T[] {
  return drops.map((drop, i) => {
    const after = m.multiply(Math.max(0, afterS[i]), stretch);
    return m.subtract(drop, m.multiply(0.5, gMps2, after, after));
  });
}
