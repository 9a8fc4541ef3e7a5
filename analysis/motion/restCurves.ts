import type { Curve, Piece, Smoothed } from './method.ts';
import { polynomialFit } from './polynomialFit.ts';
import { inflation } from './residuals.ts';

/** Half of the width of the window times its −3 dB frequency, for the second derivative of a parabola through a whole window. */
const bandwidthTimesSpan = 0.686;
/** Limit of χ² with 2 degrees of freedom that chance passes once in a thousand times. */
const chance = 13.8;

/**
 * A body that hangs at rest: one place, no velocity, no acceleration, each as uncertain as a parabola through the same positions
 * would show it to be.
 *
 * @returns null where the positions speak against rest, or are fewer than three
 */
export function restCurves({ timeS, valueM, uM }: Piece): Smoothed | null {
  const n = timeS.length;
  if (n < 3) return null;
  const spanS = timeS[n - 1] - timeS[0];
  const half = spanS / 2;
  const centreS = timeS[0] + half;
  const [place, line, parabola] = [0, 1, 2].map((degree) =>
    polynomialFit(timeS, valueM, uM, 0, n, centreS, half, degree),
  );
  if (!place || !line || !parabola) return null;
  const residuals = (c: Float64Array) =>
    valueM.map((v, i) => {
      const s = (timeS[i] - centreS) / half;
      return (v - c.reduceRight((sum, b) => sum * s + b, 0)) / uM[i];
    });
  const squares = (r: Float64Array) => r.reduce((sum, v) => sum + v * v, 0);
  const ofParabola = residuals(parabola.coefficients);
  const ofPlace = residuals(place.coefficients);
  const wider = inflation(ofParabola, 0, n);
  if (squares(ofPlace) - squares(ofParabola) > chance * wider * wider) return null;
  const constant = (value: number, u: number): Curve => ({
    value: new Float64Array(n).fill(value),
    u: new Float64Array(n).fill(wider * u),
  });
  return {
    position: constant(place.coefficients[0], Math.sqrt(place.covariance[0])),
    velocity: constant(0, Math.sqrt(line.covariance[3]) / half),
    acceleration: constant(0, (2 * Math.sqrt(parabola.covariance[8])) / half ** 2),
    jerk: null,
    bandwidthHz: new Float64Array(n).fill(bandwidthTimesSpan / spanS),
    settings: { rest: true },
  };
}
