import { adaptiveDerivatives, type Estimate } from './adaptiveDerivatives.ts';
import { accelerationBandwidth } from './bandwidth.ts';
import type { Curve, MotionMethod, Piece, Smoothed } from './method.ts';
import { inflation } from './residuals.ts';

/** The default: local polynomials, degree and window chosen at each instant for the least estimated error. */
export const adaptive: MotionMethod = {
  name: 'local polynomial of degree 2 or 4; degree and half-window chosen at each instant, for each of position, velocity and acceleration, for the least estimated error',
  smooth({ timeS, valueM, uM }: Piece): Smoothed {
    const n = timeS.length;
    const d = adaptiveDerivatives(timeS, valueM, uM, { from: 0, to: n });
    const standardised = valueM.map((y, i) =>
      d.leverage[i] < 0.9 ? (y - d.position.value[i]) / (uM[i] * Math.sqrt(1 - d.leverage[i])) : Number.NaN,
    );
    const wider = inflation(standardised, 0, n);
    const curve = ({ value, uNoise, uBias }: Estimate): Curve => ({
      value,
      u: uNoise.map((u, i) => Math.hypot(wider * u, uBias[i])),
    });
    const stepS = n > 1 ? (timeS[n - 1] - timeS[0]) / (n - 1) : Number.NaN;
    const known = new Map<string, number>();
    const { halfWindowS, degree } = d.acceleration;
    return {
      position: curve(d.position),
      velocity: curve(d.velocity),
      acceleration: curve(d.acceleration),
      jerk: null,
      bandwidthHz: halfWindowS.map((halfS, i) => {
        if (Number.isNaN(halfS)) return Number.NaN;
        const key = `${halfS} ${degree[i]}`;
        const hz = known.get(key) ?? Math.min(accelerationBandwidth(halfS, stepS, degree[i]), 0.5 / stepS);
        known.set(key, hz);
        return hz;
      }),
      settings: { halfWindowS: Array.from(halfWindowS) },
    };
  },
};
