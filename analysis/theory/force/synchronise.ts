import type { LoadCell } from '../../sheet/loadCell.ts';
import type { Tension } from '../../sheet/result.ts';
import { forceNoise } from './forceNoise.ts';
import type { ForceRecord } from './parseForceRecord.ts';

export interface Synchronised {
  /** To be added to the record's times to have the footage's [s]. */
  readonly offsetS: number;
  /** Correlation of the two curves there. */
  readonly correlation: number;
}

/**
 * Brings a load cell's clock to the footage's: where the two forces are most alike (normalised cross-correlation, which neither
 * scale nor zero of the cell can move), by the largest pull that is that of extension, or by a stated offset.
 *
 * @returns null where the two cannot be brought together: the record nowhere spans the fall, or extension was not seen
 */
export function synchronise(
  record: ForceRecord,
  tension: Tension,
  extensionS: number | null,
  how: LoadCell['synchronisation'],
): Synchronised | null {
  const noiseN = forceNoise(record);
  const at = (offsetS: number): Synchronised => ({
    offsetS,
    correlation: likeness(record, tension, noiseN, offsetS),
  });
  if (how.kind === 'offset') return at(how.offsetS);
  if (how.kind === 'peak') {
    if (extensionS === null) return null;
    const peak = record.forceN.reduce((best, f, i) => (f > record.forceN[best] ? i : best), 0);
    return at(extensionS - record.timeS[peak]);
  }
  const [firstS, lastS] = [tension.timeS[0], tension.timeS[tension.timeS.length - 1]];
  const earliest = lastS - record.timeS[record.timeS.length - 1];
  const latest = firstS - record.timeS[0];
  if (!(latest >= earliest)) return null;
  // First in steps of a frame, then around the best in steps of a tenth, a hundredth; at last the vertex of a parabola.
  let step = (lastS - firstS) / (tension.timeS.length - 1);
  let best = bestOf(at, earliest, latest, step);
  // At the end of what the record allows it may be longer on its way: then the record does not span the fall.
  if (best.offsetS < earliest + step || best.offsetS > latest - step) return null;
  for (let round = 0; round < 2; round++) {
    const finer = step / 10;
    best = bestOf(at, Math.max(earliest, best.offsetS - step), Math.min(latest, best.offsetS + step), finer);
    step = finer;
  }
  const [before, after] = [at(best.offsetS - step), at(best.offsetS + step)];
  const bend = before.correlation - 2 * best.correlation + after.correlation;
  if (!(bend < 0)) return best;
  return at(best.offsetS + (step * (before.correlation - after.correlation)) / (2 * bend));
}

function bestOf(at: (offsetS: number) => Synchronised, from: number, to: number, step: number): Synchronised {
  let best = at(from);
  for (let k = 1; from + k * step <= to; k++) {
    const next = at(from + k * step);
    if (next.correlation > best.correlation) best = next;
  }
  return best;
}

/** Correlation of the record with the tension at the tension's times, each point counted by its noise in both. */
function likeness(
  record: ForceRecord,
  { timeS, anchorN, uAnchorN }: Tension,
  noiseN: number,
  offsetS: number,
): number {
  const force = forceAt(
    record,
    timeS.map((t) => t - offsetS),
  );
  let [w, a, b, aa, bb, ab] = [0, 0, 0, 0, 0, 0];
  force.forEach((f, i) => {
    if (!Number.isFinite(f)) return;
    const weight = 1 / (uAnchorN[i] ** 2 + noiseN ** 2);
    w += weight;
    a += weight * f;
    b += weight * anchorN[i];
    aa += weight * f * f;
    bb += weight * anchorN[i] ** 2;
    ab += weight * f * anchorN[i];
  });
  const [varianceA, varianceB] = [aa - (a * a) / w, bb - (b * b) / w];
  return varianceA > 0 && varianceB > 0 ? (ab - (a * b) / w) / Math.sqrt(varianceA * varianceB) : -1;
}

/** The record's force at ascending times of its own clock, straight between its points; NaN outside. */
export function forceAt({ timeS, forceN }: ForceRecord, wantedS: readonly number[]): number[] {
  let i = 0;
  let high = timeS.length - 1;
  // Start near the first time by bisection; from there on the times only grow.
  while (high - i > 1) {
    const middle = (i + high) >> 1;
    if (timeS[middle] <= wantedS[0]) i = middle;
    else high = middle;
  }
  return wantedS.map((t) => {
    if (t < timeS[0] || t > timeS[timeS.length - 1]) return Number.NaN;
    while (i < timeS.length - 2 && timeS[i + 1] < t) i++;
    const share = (t - timeS[i]) / (timeS[i + 1] - timeS[i]);
    return forceN[i] + share * (forceN[i + 1] - forceN[i]);
  });
}
