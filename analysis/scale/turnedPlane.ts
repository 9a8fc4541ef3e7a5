import type { PlanePoint } from './planePoint.ts';

/** How the plane of the fall is turned against the camera's sensor [rad]. */
export interface Turn {
  /** The upper end of the plane is nearer to the camera (+): the camera looks down on it. */
  readonly pitchRad: number;
  /** The left side of the plane is nearer to the camera (+). */
  readonly yawRad: number;
}

/**
 * Where a place is in the turned plane, from where a pinhole camera sees it: x right and y down [m], both from the point where the
 * camera's axis meets the plane; what is seen is in metres at the distance of that point.
 *
 * @param distanceM  from the camera to that point
 */
export function inTurnedPlane(seen: PlanePoint, { pitchRad, yawRad }: Turn, distanceM: number): PlanePoint {
  if (pitchRad === 0 && yawRad === 0) return seen;
  // Unit vectors of the plane (x right, y down, z away from the camera): seen = D (x e + y f) / (D + its z).
  const e = [Math.cos(yawRad), -Math.sin(yawRad) * Math.sin(pitchRad), Math.sin(yawRad) * Math.cos(pitchRad)];
  const f = [0, Math.cos(pitchRad), Math.sin(pitchRad)];
  const a = distanceM * e[0] - seen.x * e[2];
  const b = -seen.x * f[2];
  const c = distanceM * e[1] - seen.y * e[2];
  const d = distanceM * f[1] - seen.y * f[2];
  const determinant = a * d - b * c;
  return {
    x: (distanceM * (seen.x * d - b * seen.y)) / determinant,
    y: (distanceM * (a * seen.y - c * seen.x)) / determinant,
  };
}
