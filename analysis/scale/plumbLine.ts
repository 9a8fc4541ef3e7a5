import type { PlanePoint } from './planePoint.ts';

export interface Down {
  /** Angle from the y axis to the plumb line [rad], positive clockwise as seen where y is down. */
  readonly downRad: number;
  readonly uDownRad: number;
}

/**
 * Direction of down from two places on a plumb line, whichever of them comes first.
 *
 * @param u  standard uncertainty of each place, in the same unit
 */
export function downAlong(a: PlanePoint, b: PlanePoint, u: number): Down {
  const [top, bottom] = a.y <= b.y ? [a, b] : [b, a];
  const [dx, dy] = [bottom.x - top.x, bottom.y - top.y];
  return { downRad: -Math.atan2(dx, dy), uDownRad: (Math.SQRT2 * u) / Math.hypot(dx, dy) };
}
