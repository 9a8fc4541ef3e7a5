import { type Curve, emptyCurve } from './curve.ts';

/** Free fall from rest at releaseS: y = -g τ²/2; at rest before. */
export function freeFall(timeS: Float64Array, releaseS: number, gMps2: number): Curve {
  const curve = emptyCurve(timeS);
  for (let i = 0; i < timeS.length; i++) {
    const t = timeS[i] - releaseS;
    if (t <= 0) continue;
    curve.yM[i] = -0.5 * gMps2 * t * t;
    curve.vyMps[i] = -gMps2 * t;
    curve.ayMps2[i] = -gMps2;
  }
  return curve;
}
