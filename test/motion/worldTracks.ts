import type { WorldTrack } from '../../analysis/motion/worldTrack.ts';
import { seededRandom } from '../../fixtures/random.ts';

/** A track of exact heights with Gaussian noise; x stays at 0. */
export function noisyTrack(
  role: WorldTrack['role'],
  timeS: Float64Array,
  yM: (timeS: number) => number,
  noiseM: number,
  seed: number,
): WorldTrack {
  const random = seededRandom(seed);
  const y = timeS.map((t) => yM(t) + noiseM * random.gaussian());
  const x = timeS.map(() => noiseM * random.gaussian());
  return {
    bodyId: role,
    role,
    frame: Int32Array.from(timeS.keys()),
    timeS,
    xM: x,
    yM: y,
    uXM: new Float64Array(timeS.length).fill(noiseM),
    uYM: new Float64Array(timeS.length).fill(noiseM),
  };
}
