import { polynomialFit } from './polynomialFit.ts';

/**
 * Bandwidth of the acceleration by a local polynomial: the frequency at which the second derivative of a cosine comes out
 * 3 dB too small, worked out from the estimator's own weights on even times, point in the middle of the window.
 *
 * @returns [Hz]; Infinity where the window is too small to smooth
 */
export function accelerationBandwidth(halfWindowS: number, frameTimeS: number, degree: number): number {
  const m = Math.floor(halfWindowS / frameTimeS + 1e-6);
  const n = 2 * m + 1;
  if (n < degree + 1) return Number.POSITIVE_INFINITY;
  const timeS = Float64Array.from({ length: n }, (_, i) => (i - m) * frameTimeS);
  const u = new Float64Array(n).fill(1);
  const response = (frequencyHz: number): number => {
    const omega = 2 * Math.PI * frequencyHz;
    const fit = polynomialFit(
      timeS,
      timeS.map((t) => Math.cos(omega * t)),
      u,
      0,
      n,
      0,
      m * frameTimeS,
      degree,
    );
    if (!fit) return 1;
    return (2 * fit.coefficients[2]) / (m * frameTimeS) ** 2 / (-omega * omega);
  };
  const nyquist = 0.5 / frameTimeS;
  let low = 0;
  let high = 0;
  // The response falls from 1: walk up until it has, then halve the interval.
  for (const step = nyquist / 400; high < nyquist; low = high) {
    high += step;
    if (response(high) < Math.SQRT1_2) break;
  }
  for (let k = 0; k < 30; k++) {
    const middle = (low + high) / 2;
    if (response(middle) < Math.SQRT1_2) high = middle;
    else low = middle;
  }
  return high;
}
