import type { Air } from './air.ts';
import { type Curve, emptyCurve } from './curve.ts';
import { sphereDrag } from './sphereDrag.ts';

export interface Sphere {
  readonly diameterM: number;
  readonly massKg: number;
  /**
   * Stated for a body that is no smooth sphere, referred to the circle of diameterM and constant; it displaces the air of a sphere
   * of that diameter. Absent: the standard drag curve.
   */
  readonly dragCoefficient?: number | undefined;
}

/** Longest step of the integration [s]: the drag of a laboratory drop changes over tenths of a second. */
const longestStepS = 0.002;

/**
 * Fall of a sphere from rest in still air with drag, buoyancy and added mass:
 * (m + m_a/2) dv/dt = (m - m_a) g - ρ C_d(Re) A v²/2, m_a the mass of the air displaced. Fourth-order Runge-Kutta.
 *
 * @param timeS      ascending
 * @param dragShare  factor on C_d, for the sensitivity of a result to it
 */
export function freeFallDrag(
  timeS: Float64Array,
  releaseS: number,
  gMps2: number,
  sphere: Sphere,
  air: Air,
  dragShare = 1,
): Curve {
  const area = (Math.PI / 4) * sphere.diameterM ** 2;
  const displacedKg = (air.densityKgpm3 * Math.PI * sphere.diameterM ** 3) / 6;
  const inertiaKg = sphere.massKg + displacedKg / 2;
  const pull = ((sphere.massKg - displacedKg) * gMps2) / inertiaKg;
  const reynoldsPerMps = (air.densityKgpm3 * sphere.diameterM) / air.viscosityPas;
  const dragPer = (dragShare * air.densityKgpm3 * area) / (2 * inertiaKg);
  const dragAt = (v: number) => sphere.dragCoefficient ?? sphereDrag(reynoldsPerMps * Math.abs(v));
  const acceleration = (v: number) => pull - dragPer * dragAt(v) * v * Math.abs(v);

  const curve = emptyCurve(timeS);
  let t = releaseS;
  let drop = 0;
  let v = 0;
  for (let i = 0; i < timeS.length; i++) {
    if (timeS[i] <= releaseS) continue;
    const steps = Math.max(1, Math.ceil((timeS[i] - t) / longestStepS));
    const h = (timeS[i] - t) / steps;
    for (let s = 0; s < steps; s++) {
      const a1 = acceleration(v);
      const v2 = v + (h / 2) * a1;
      const a2 = acceleration(v2);
      const v3 = v + (h / 2) * a2;
      const a3 = acceleration(v3);
      const v4 = v + h * a3;
      const a4 = acceleration(v4);
      drop += (h / 6) * (v + 2 * v2 + 2 * v3 + v4);
      v += (h / 6) * (a1 + 2 * a2 + 2 * a3 + a4);
    }
    t = timeS[i];
    curve.yM[i] = -drop;
    curve.vyMps[i] = -v;
    curve.ayMps2[i] = -acceleration(v);
  }
  return curve;
}
