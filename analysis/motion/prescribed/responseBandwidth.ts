/** A response counts as passed while it is off by less than this in amplitude and phase together: 3 dB where the phase is kept. */
const passedWithin = 1 - Math.SQRT1_2;
const growth = 1.12;
const halvings = 24;

/**
 * Bandwidth of an acceleration that is a weighted sum of positions: the lowest frequency at which the acceleration of a wave comes
 * out wrong by 29 %. In the middle of a record, where weights are symmetric, that is where it is 3 dB too small; at the ends, where
 * the phase suffers as well, it is less than the amplitude alone would say.
 *
 * @param weights   of the positions [1/s²]
 * @param offsetsS  times of the positions from the instant of the acceleration [s]
 * @param mostHz    half the frame rate
 */
export function responseBandwidth(weights: Float64Array, offsetsS: Float64Array, mostHz: number): number {
  const off = (frequencyHz: number): number => {
    const omega = 2 * Math.PI * frequencyHz;
    let re = 0;
    let im = 0;
    for (let k = 0; k < weights.length; k++) {
      re += weights[k] * Math.cos(omega * offsetsS[k]);
      im += weights[k] * Math.sin(omega * offsetsS[k]);
    }
    return Math.hypot(-re / (omega * omega) - 1, im / (omega * omega));
  };
  const reachS = Math.max(Math.abs(offsetsS[0]), Math.abs(offsetsS[offsetsS.length - 1]));
  let low = Math.min(mostHz, 0.05 / reachS);
  let high = low;
  while (off(high) < passedWithin) {
    if (high >= mostHz) return mostHz;
    low = high;
    high = Math.min(mostHz, high * growth);
  }
  for (let k = 0; k < halvings; k++) {
    const middle = (low + high) / 2;
    if (off(middle) < passedWithin) low = middle;
    else high = middle;
  }
  return high;
}
