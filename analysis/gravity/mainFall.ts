import { plainNumbers } from '../uncertainty/arithmetic.ts';
import { leastSquares } from '../uncertainty/linearSystem.ts';

/** Positions of a body that falls, with the frames and times they have. */
export interface FallingTrack {
  readonly frame: Int32Array;
  readonly timeS: Float64Array;
  readonly yM: Float64Array;
  readonly uYM: Float64Array;
}

/** The fall of a body between release and landing as a parabola, air not taken off. */
export interface MainFall {
  /** Places in the track, ascending. */
  readonly used: readonly number[];
  readonly accelerationMps2: number;
  /** Instant at which the parabola is at rest: the release, to some milliseconds [s]. */
  readonly restS: number;
}

/** Parts of the fall that are fitted: not the release, not the landing. */
const fromShare = 0.1;
const toShare = 0.93;
const leastPoints = 6;

/** @returns null when the body hardly falls, or too few places lie on its way */
export function mainFall({ timeS, yM, uYM }: FallingTrack): MainFall | null {
  const top = yM[0];
  let lowest = 0;
  for (let i = 1; i < yM.length; i++) if (yM[i] < yM[lowest]) lowest = i;
  const depthM = top - yM[lowest];
  if (!(depthM > 20 * (uYM[lowest] ?? 0))) return null;
  const used = Array.from({ length: lowest + 1 }, (_, i) => i).filter(
    (i) => top - yM[i] > fromShare * depthM && top - yM[i] < toShare * depthM,
  );
  if (used.length < leastPoints) return null;
  const zeroS = timeS[used[0]];
  const [, slope, curvature] = leastSquares(
    plainNumbers,
    used.map((i) => [1, timeS[i] - zeroS, (timeS[i] - zeroS) ** 2]),
    used.map((i) => yM[i]),
  );
  return { used, accelerationMps2: -2 * curvature, restS: zeroS - slope / (2 * curvature) };
}
