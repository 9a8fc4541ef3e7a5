import { bandSolve } from './banded.ts';
import { valuesAt } from './curves.ts';
import type { SnapFit } from './fit.ts';
import { cornerOf } from './grading.ts';
import { informationOf, informationOfObservations } from './information.ts';
import type { Scaled } from './scaled.ts';

/** Passed while amplitude and phase together are off by less than 3 dB of an amplitude whose phase is kept. */
const passedWithin = 1 - Math.SQRT1_2;
/** Ratio of one frequency tried to the next; between them by powers. */
const rung = 1.15;
/** Frequencies from this share of the least corner on. */
const startShare = 0.3;

/**
 * Frequency up to which the acceleration of a wave, sampled at the record's times, comes out within 3 dB, at given instants in cycles
 * per unit of scaled time: the −3 dB point of the smoother's equivalent kernel there, which at the ends is lopsided.
 *
 * @param most  half the frame rate, in the same unit
 * Cost some 50 × O(points).
 */
export function bandwidthAt(
  scaled: Scaled,
  { data, density }: SnapFit,
  at: Float64Array,
  most: number,
): Float64Array {
  const { cells, noise, positions } = data;
  const { factor } = density.posterior;
  const rest = scaled.rest(data.startMps2);
  const least = density.knots.reduce((a, k) => Math.min(a, cornerOf(k, positions.weights / noise)), Infinity);
  const out = new Float64Array(at.length).fill(Number.NaN);
  const before = new Float64Array(at.length);
  let open = at.length;
  const start = Math.max(0.2, (startShare * least) / (2 * Math.PI));
  for (let frequency = start; open > 0 && frequency < most * rung; frequency *= rung) {
    const omega = 2 * Math.PI * frequency;
    const [even, odd] = [0, Math.PI / 2].map((phase) => {
      // Derivatives of cos(ωt - φ): a quarter turn and a factor ω each.
      const wave = (t: number, derivative: number) =>
        omega ** derivative * Math.cos(omega * t - phase + (derivative * Math.PI) / 2);
      const { right } = informationOf(
        cells,
        scaled.time,
        scaled.time.map((t) => wave(t, 0)),
        scaled.u,
      );
      const ofRest = informationOfObservations(
        cells,
        rest.map((o) => ({ ...o, value: wave(o.time, o.derivative) })),
      ).right;
      for (let k = 0; k < right.length; k++) right[k] = right[k] / noise + ofRest[k];
      bandSolve(factor, cells.size, right);
      return valuesAt(cells, right, at, 2);
    });
    for (let k = 0; k < at.length; k++) {
      if (!Number.isNaN(out[k])) continue;
      const [c, s] = [Math.cos(omega * at[k]), Math.sin(omega * at[k])];
      const re = (even[k] * c + odd[k] * s) / -(omega * omega);
      const im = (odd[k] * c - even[k] * s) / -(omega * omega);
      const off = Math.hypot(re - 1, im);
      if (off >= passedWithin) {
        const share = before[k] > 0 ? Math.log(passedWithin / before[k]) / Math.log(off / before[k]) : 1;
        out[k] = Math.min(most, frequency * rung ** (share - 1));
        open--;
      }
      before[k] = off;
    }
  }
  return out.map((f) => (Number.isNaN(f) ? most : f));
}
