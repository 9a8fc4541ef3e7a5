import { sphereDrag } from '../theory/sphereDrag.ts';
import type { Arithmetic, Operand } from '../uncertainty/arithmetic.ts';

/** A ball in air, in whatever arithmetic. */
export interface BallInAir<T> {
  readonly gMps2: Operand<T>;
  readonly diameterM: Operand<T>;
  readonly massKg: Operand<T>;
  readonly densityKgpm3: Operand<T>;
  readonly viscosityPas: Operand<T>;
  /** Factor on the standard drag curve, or on the stated coefficient. */
  readonly dragShare: Operand<T>;
  /** Mass of air that is moved along, as a share of the displaced: 0.5 for a sphere in potential flow (Lamb, Hydrodynamics, art. 92). */
  readonly addedMass: Operand<T>;
  /** Stated drag coefficient of a body that is no smooth sphere; absent: the standard drag curve. */
  readonly dragCoefficient?: number | undefined;
}

/** Longest step [s]: the drag of a laboratory drop changes over tenths of a second. */
const longestStepS = 0.005;

/**
 * How far a ball has fallen from rest after each time, with drag, buoyancy and added mass:
 * (m + c m_a) dv/dt = (m - m_a) g - ρ C_d(Re) A v²/2, m_a the displaced mass. Fourth-order Runge-Kutta.
 *
 * @param afterS  ascending times after release [s]; those not after it give 0
 * @param stretch  factor on all times
 */
export function fallInAir<T>(
  m: Arithmetic<T>,
  afterS: ArrayLike<number>,
  stretch: Operand<T>,
  ball: BallInAir<T>,
): T[] {
  const displaced = m.multiply(Math.PI / 6, ball.densityKgpm3, m.power(ball.diameterM, 3));
  const inertia = m.add(ball.massKg, m.multiply(ball.addedMass, displaced));
  const pull = m.divide(m.multiply(m.subtract(ball.massKg, displaced), ball.gMps2), inertia);
  const reynoldsPerMps = m.divide(m.multiply(ball.densityKgpm3, ball.diameterM), ball.viscosityPas);
  const dragPer = m.divide(
    m.multiply(Math.PI / 8, ball.dragShare, ball.densityKgpm3, m.power(ball.diameterM, 2)),
    inertia,
  );
  const acceleration = (v: T): T => {
    if (m.valueOf(v) <= 0) return pull;
    const drag = ball.dragCoefficient ?? m.through(sphereDrag, m.multiply(reynoldsPerMps, v));
    return m.subtract(pull, m.multiply(dragPer, drag, v, v));
  };
  let drop = m.constant(0);
  let v = m.constant(0);
  let reached = 0;
  return Array.from(afterS, (to) => {
    if (!(to > 0)) return m.constant(0);
    const steps = Math.max(1, Math.ceil((to - reached) / longestStepS));
    const h = m.multiply((to - reached) / steps, stretch);
    for (let s = 0; s < steps; s++) {
      const a1 = acceleration(v);
      const v2 = m.add(v, m.multiply(0.5, h, a1));
      const a2 = acceleration(v2);
      const v3 = m.add(v, m.multiply(0.5, h, a2));
      const a3 = acceleration(v3);
      const v4 = m.add(v, m.multiply(h, a3));
      drop = m.add(drop, m.multiply(1 / 6, h, m.add(v, m.multiply(2, v2), m.multiply(2, v3), v4)));
      v = m.add(v, m.multiply(1 / 6, h, m.add(a1, m.multiply(2, a2), m.multiply(2, a3), acceleration(v4))));
    }
    reached = to;
    return drop;
  });
}
