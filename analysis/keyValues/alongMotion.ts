import type { Motion } from '../sheet/result.ts';

/** Standard uncertainty of a vector's magnitude from those of its components. */
function uOfMagnitude(x: number, y: number, ux: number, uy: number): number {
  const size = Math.hypot(x, y);
  return size > 0 ? Math.hypot((x / size) * ux, (y / size) * uy) : Math.hypot(ux, uy);
}

export function speedAt({ vxMps, vyMps, uVxMps, uVyMps }: Motion, i: number): { value: number; u: number } {
  return {
    value: Math.hypot(vxMps[i], vyMps[i]),
    u: uOfMagnitude(vxMps[i], vyMps[i], uVxMps[i], uVyMps[i]),
  };
}

export function accelerationAt(
  { axMps2, ayMps2, uAxMps2, uAyMps2 }: Motion,
  i: number,
): { value: number; u: number } {
  return {
    value: Math.hypot(axMps2[i], ayMps2[i]),
    u: uOfMagnitude(axMps2[i], ayMps2[i], uAxMps2[i], uAyMps2[i]),
  };
}

/** Between two instants of the motion: the cubic with both values and slopes, and its rate of change. */
export function between(
  timeS: readonly number[],
  values: readonly number[],
  slopes: readonly number[],
  i: number,
  atS: number,
): { value: number; slope: number } {
  const h = timeS[i + 1] - timeS[i];
  const s = (atS - timeS[i]) / h;
  const rise = values[i + 1] - values[i];
  const [a, b] = [slopes[i] * h - rise, rise - slopes[i + 1] * h];
  return {
    value: values[i] + s * rise + s * (1 - s) * (a * (1 - s) + b * s),
    slope: (rise + (1 - 2 * s) * (a * (1 - s) + b * s) + s * (1 - s) * (b - a)) / h,
  };
}

/** Index of the instant at or before a time, so that the next one is after it; null outside the motion. */
export function stepBefore(timeS: readonly number[], atS: number): number | null {
  const after = timeS.findIndex((t) => t > atS);
  if (after <= 0) return timeS.length > 1 && atS === timeS[timeS.length - 1] ? timeS.length - 2 : null;
  return after - 1;
}
