import { type Curve, emptyCurve } from './curve.ts';

/** Time to extension in units of √(L/g), energy form, zero separation: (2π)^(3/2)/Γ(1/4)² (Calkin & March 1989). */
export const energyExtensionTime = 1.198140234735592;
/** The same in momentum form: the tip falls freely through L. */
export const momentumExtensionTime = Math.SQRT2;

/** Beyond this share of the fall the energy form's acceleration is that of a single link, not of a tether. */
const lastShare = 0.999;

/** Tip speed and acceleration after falling the share s of the length, energy form: v² = gL s(2-s)/(1-s), a = g(1 + (1-s)^-2)/2. */
export function energyForm(
  s: number,
  lengthM: number,
  gMps2: number,
): { speedMps: number; accelerationMps2: number } {
  return {
    speedMps: Math.sqrt((gMps2 * lengthM * s * (2 - s)) / (1 - s)),
    accelerationMps2: (gMps2 / 2) * (1 + 1 / (1 - s) ** 2),
  };
}

const intervals = 2048;

/** ∫√cos θ dθ from 0 to each of evenly spaced θ up to π/2, with cos θ = 1 - s: time in units of √(L/g). Simpson's rule. */
function makeTimeTable(): Float64Array {
  const sum = new Float64Array(intervals + 1);
  const h = Math.PI / 2 / intervals;
  const f = (theta: number) => Math.sqrt(Math.max(0, Math.cos(theta)));
  for (let i = 0; i < intervals; i++) {
    const a = i * h;
    sum[i + 1] = sum[i] + (h / 6) * (f(a) + 4 * f(a + h / 2) + f(a + h));
  }
  return sum;
}
const timeTable = makeTimeTable();

/** Share of the length that the tip has fallen at a time in units of √(L/g), energy form; 1 from extension on. */
export function energyShare(time: number): number {
  const times = timeTable;
  if (time <= 0) return 0;
  if (time >= times[intervals]) return 1;
  let low = 0;
  let high = intervals;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (times[middle] <= time) low = middle;
    else high = middle;
  }
  // Within an interval time is nearly linear in θ with slope √cos θ: one Newton step from the left edge, one more to settle.
  const h = Math.PI / 2 / intervals;
  let theta = low * h;
  for (let k = 0; k < 3; k++) {
    const f = (x: number) => Math.sqrt(Math.max(0, Math.cos(x)));
    const a = low * h;
    const part = ((theta - a) / 6) * (f(a) + 4 * f((a + theta) / 2) + f(theta));
    theta = Math.min(
      (low + 1) * h,
      Math.max(a, theta + (time - times[low] - part) / Math.max(f(theta), 1e-3)),
    );
  }
  return 1 - Math.cos(theta);
}

/** Folded tether, one end fixed, released from rest beside it, no energy lost at the fold; ends when the tether is straight. */
export function foldedTetherEnergy(
  timeS: Float64Array,
  releaseS: number,
  lengthM: number,
  gMps2: number,
): Curve {
  const unitS = Math.sqrt(lengthM / gMps2);
  return untilExtension(timeS, releaseS, energyExtensionTime * unitS, (t) => {
    const s = Math.min(energyShare(t / unitS), lastShare);
    const { speedMps, accelerationMps2 } = energyForm(s, lengthM, gMps2);
    return [-s * lengthM, -speedMps, -accelerationMps2];
  });
}

/** The same with all of the fold's impact lost (momentum form): the tip falls freely, until it has fallen the length. */
export function foldedTetherMomentum(
  timeS: Float64Array,
  releaseS: number,
  lengthM: number,
  gMps2: number,
): Curve {
  return untilExtension(timeS, releaseS, momentumExtensionTime * Math.sqrt(lengthM / gMps2), (t) => [
    -0.5 * gMps2 * t * t,
    -gMps2 * t,
    -gMps2,
  ]);
}

function untilExtension(
  timeS: Float64Array,
  releaseS: number,
  durationS: number,
  at: (t: number) => readonly [number, number, number],
): Curve {
  const curve = emptyCurve(timeS.filter((t) => t < releaseS + durationS));
  for (let i = 0; i < curve.timeS.length; i++) {
    const t = curve.timeS[i] - releaseS;
    if (t > 0) [curve.yM[i], curve.vyMps[i], curve.ayMps2[i]] = at(t);
  }
  return curve;
}
