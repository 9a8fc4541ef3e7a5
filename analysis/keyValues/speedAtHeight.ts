import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Common } from '../motion/worldTrack.ts';
import type { KeyValue } from '../sheet/result.ts';
import { measured } from '../uncertainty/measured.ts';
import { between, speedAt } from './alongMotion.ts';
import { commonSources, uLengthRel } from './commonSources.ts';

/**
 * Speed of a body where it first passes a height after its release.
 *
 * @param heightM   height in the world [m]
 * @param number    place of the height in the sheet, from 1
 * @param startYM   height before release: from there the scale carries the height
 * @returns null when the body does not pass it
 */
export function speedAtHeight(
  body: 'tip' | 'ball',
  { motion }: BodyMotion,
  heightM: number,
  number: number,
  releaseS: number,
  startYM: number,
  common: Common,
): KeyValue | null {
  const { timeS, yM, vxMps, vyMps, axMps2, ayMps2, uYM } = motion;
  const passes = (i: number) => (yM[i] - heightM) * (yM[i + 1] - heightM) <= 0 && yM[i] !== yM[i + 1];
  const i = timeS.findIndex((t, k) => t >= releaseS && k + 1 < timeS.length && passes(k));
  if (i < 0) return null;
  let [low, high] = [timeS[i], timeS[i + 1]];
  const above = yM[i] > heightM;
  for (let k = 0; k < 50; k++) {
    const middle = (low + high) / 2;
    if (between(timeS, yM, vyMps, i, middle).value > heightM === above) low = middle;
    else high = middle;
  }
  const vx = between(timeS, vxMps, axMps2, i, low).value;
  const vy = between(timeS, vyMps, ayMps2, i, low).value;
  const speedMps = Math.hypot(vx, vy);
  // Where the height is uncertain, so is the instant: dv = (a · v/|v|) dt, dt = dy/|vy|.
  const share = (low - timeS[i]) / (timeS[i + 1] - timeS[i]);
  const at = (a: readonly number[]) => a[i] + share * (a[i + 1] - a[i]);
  const along = (vx * at(axMps2) + vy * at(ayMps2)) / speedMps;
  const perMetre = Math.abs(along / vy);
  return measured(
    `${body}.speedAtHeight.${number}`,
    speedMps,
    'm/s',
    [
      { source: 'positions and smoothing', u: Math.max(speedAt(motion, i).u, speedAt(motion, i + 1).u) },
      { source: 'place of the body', u: perMetre * Math.max(uYM[i], uYM[i + 1]) },
      { source: 'height by the scale', u: perMetre * Math.abs(heightM - startYM) * uLengthRel(common) },
      ...commonSources(common, speedMps, { length: 1, time: -1 }),
    ],
    {
      definition: `speed where the body first passes the height ${heightM} m after its release (world, y up)`,
    },
  );
}
