import { plainNumbers } from '../uncertainty/arithmetic.ts';
import { leastSquares } from '../uncertainty/linearSystem.ts';

/** The fall is seen at so many instants; more change nothing. */
const instants = 60;
const smallPitchRad = 1e-3;

/**
 * How g measured from a ball changes with the camera's pitch against the plane of the fall: relative change for 1 rad of looking
 * down (negative). A pinhole camera whose axis meets the plane in the middle of the fall; the bar spans the fall.
 *
 * A plane turned by θ is seen at y cos θ/(1 - y sin θ/D): for a camera that looks down the upper end is nearer and looks larger,
 * so the fall is stretched where it is slow and shortened where it is fast. The bar takes off only what both have in common.
 *
 * @param cameraDistanceM  from the camera to the plane along its axis
 * @throws RangeError if the fall or the distance is not greater than 0
 */
export function pitchEffect(cameraDistanceM: number, fallM: number): number {
  if (!(cameraDistanceM > 0 && fallM > 0)) {
    throw new RangeError(`pitchEffect: a fall of ${fallM} m at ${cameraDistanceM} m`);
  }
  const curvature = (pitchRad: number) => {
    // height above the axis; looking down, what is higher is nearer
    const seen = (y: number) => (y * Math.cos(pitchRad)) / (1 - (y * Math.sin(pitchRad)) / cameraDistanceM);
    const spanSeen = seen(fallM / 2) - seen(-fallM / 2);
    const perSeen = fallM / spanSeen;
    const at = Array.from({ length: instants }, (_, i) => i / (instants - 1));
    const heights = at.map((t) => perSeen * seen(fallM / 2 - fallM * t * t));
    const [, , c] = leastSquares(
      plainNumbers,
      at.map((t) => [1, t, t * t]),
      heights,
    );
    return c;
  };
  return (curvature(smallPitchRad) / curvature(-smallPitchRad) - 1) / (2 * smallPitchRad);
}
