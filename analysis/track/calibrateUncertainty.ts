import type { Track } from './track.ts';

/** Points to a side of the local fit and its degree. Errors of a codec hang together over few frames or over many: both. */
const scales = [
  { reach: 15, degree: 4 },
  { reach: 40, degree: 6 },
];
/** Fewer measured frames than this say nothing of their scatter. */
const leastPoints = 60;

/**
 * Holds the stated uncertainty of each axis against the scatter of the positions about a smooth motion, and widens it where
 * that is larger: in coded footage the noise of the pixels says too little (it covers 25 to 70 % of the errors, shared limits,
 * section A), because the codec's errors are alike over many pixels.
 *
 * The scatter is the median of the standardised distances from a local polynomial, so that the few frames in which the motion
 * is not smooth (release, extension) do not count; of 31 frames with degree 4 and of 81 with degree 6 the larger. A constant
 * offset stays unseen.
 */
export function calibrateUncertainty(track: Track): Track {
  const data = Array.from(track.frame.keys()).filter(
    (i) => track.state[i] === 'measured' && !Number.isNaN(track.camera?.xPx[i] ?? 0),
  );
  const widen = (positions: Float64Array, u: Float64Array): Float64Array => {
    const factor = Math.max(1, ...scales.map((scale) => scatterOver(data, track.frame, positions, u, scale)));
    return u.map((v, i) => (track.state[i] === 'measured' ? factor * v : v));
  };
  const onRig = (positions: Float64Array, shift: Float64Array | undefined) =>
    shift ? positions.map((v, i) => v - shift[i]) : positions;
  return {
    ...track,
    uXPx: widen(onRig(track.xPx, track.camera?.xPx), track.uXPx),
    uYPx: widen(onRig(track.yPx, track.camera?.yPx), track.uYPx),
  };
}

/** Robust standard deviation of the standardised residuals; 1 where there are too few points. */
function scatterOver(
  data: readonly number[],
  frame: Int32Array,
  positions: Float64Array,
  u: Float64Array,
  { reach, degree }: (typeof scales)[number],
): number {
  if (data.length < leastPoints) return 1;
  const { weights, leverage } = middleWeights(reach, degree);
  const sizes: number[] = [];
  for (let k = reach; k < data.length - reach; k++) {
    // Only where the frames follow one another: the weights are for even times.
    if (frame[data[k + reach]] - frame[data[k - reach]] !== 2 * reach) continue;
    let fitted = 0;
    for (let j = -reach; j <= reach; j++) fitted += weights[j + reach] * positions[data[k + j]];
    sizes.push(Math.abs(positions[data[k]] - fitted) / (u[data[k]] * Math.sqrt(1 - leverage)));
  }
  if (sizes.length < leastPoints / 2) return 1;
  sizes.sort((a, b) => a - b);
  return sizes[sizes.length >> 1] / 0.6745; // median of |N(0, 1)|
}

/** Savitzky-Golay weights of the middle point for an even degree (the same as for the next odd one), by Gram polynomials of even order. */
function middleWeights(reach: number, degree: number): { weights: Float64Array; leverage: number } {
  const n = 2 * reach + 1;
  const basis: Float64Array[] = [];
  for (let order = 0; order <= degree; order += 2) {
    const v = Float64Array.from({ length: n }, (_, i) => ((i - reach) / reach) ** order);
    for (const b of basis) {
      const share = v.reduce((s, x, i) => s + x * b[i], 0);
      for (let i = 0; i < n; i++) v[i] -= share * b[i];
    }
    const norm = Math.sqrt(v.reduce((s, x) => s + x * x, 0));
    basis.push(v.map((x) => x / norm));
  }
  const weights = Float64Array.from({ length: n }, (_, i) => basis.reduce((s, b) => s + b[i] * b[reach], 0));
  return { weights, leverage: weights[reach] };
}
