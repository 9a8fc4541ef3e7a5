import type { WorldTrack } from '../../analysis/motion/worldTrack.ts';
import { seededRandom } from '../../fixtures/random.ts';

/**
 * A folded tether's fall integrated from the momentum balance of its falling arm, nothing of the program in it: arm of mass
 * A = M + m (1 - x/L)/2, A a = A g + γ m v²/(4 L). Fourth-order Runge-Kutta, steps of 20 µs.
 */
export interface FoldedSpec {
  readonly lengthM: number;
  readonly gMps2: number;
  readonly energyShare: number;
  /** Mass at the free end as a share of the tether's. */
  readonly endWeightShare: number;
}

const stepS = 2e-5;

/** Fall of the tip at each of ascending times after release [m]; stays at the length from extension on. */
export function foldedFall(spec: FoldedSpec, sinceReleaseS: Float64Array): Float64Array {
  const { lengthM, gMps2, energyShare, endWeightShare } = spec;
  const acceleration = (x: number, v: number) =>
    gMps2 + (energyShare * v * v) / (4 * lengthM * (endWeightShare + (1 - x / lengthM) / 2));
  let t = 0;
  let x = 0;
  let v = 0;
  return sinceReleaseS.map((until) => {
    const steps = Math.max(0, Math.ceil((until - t) / stepS - 1e-9));
    const h = steps > 0 ? (until - t) / steps : 0;
    for (let k = 0; k < steps && x < lengthM * 0.9999; k++) {
      const a1 = acceleration(x, v);
      const a2 = acceleration(x + (h / 2) * v, v + (h / 2) * a1);
      const a3 = acceleration(x + (h / 2) * (v + (h / 2) * a1), v + (h / 2) * a2);
      const a4 = acceleration(x + h * (v + (h / 2) * a2), v + h * a3);
      x += h * v + ((h * h) / 6) * (a1 + a2 + a3);
      v += (h / 6) * (a1 + 2 * a2 + 2 * a3 + a4);
    }
    t = Math.max(t, until);
    return Math.min(x, lengthM);
  });
}

export interface RecordSpec {
  readonly captureRateHz: number;
  readonly releaseS: number;
  readonly lastS: number;
  readonly noiseM: number;
  readonly seed: number;
  /** First-order correlation of the noise from frame to frame. */
  readonly correlation?: number;
}

/** A tip's track: at rest at 0, then fallen by `fallM` of the times after release, with normal noise. */
export function recordOf(
  fallM: (sinceReleaseS: Float64Array) => Float64Array,
  { captureRateHz, releaseS, lastS, noiseM, seed, correlation = 0 }: RecordSpec,
  role: WorldTrack['role'] = 'tip',
): WorldTrack {
  const random = seededRandom(seed);
  const n = Math.floor(lastS * captureRateHz) + 1;
  const timeS = Float64Array.from({ length: n }, (_, i) => i / captureRateHz);
  const fall = fallM(timeS.map((t) => Math.max(0, t - releaseS)));
  let error = random.gaussian();
  const yM = fall.map((x) => {
    error = correlation * error + Math.sqrt(1 - correlation ** 2) * random.gaussian();
    return -x + noiseM * error;
  });
  return {
    bodyId: role === 'tip' ? 'tip' : 'ball',
    role,
    frame: Int32Array.from({ length: n }, (_, i) => i),
    timeS,
    xM: new Float64Array(n),
    yM,
    uXM: new Float64Array(n).fill(noiseM),
    uYM: new Float64Array(n).fill(noiseM),
  };
}
