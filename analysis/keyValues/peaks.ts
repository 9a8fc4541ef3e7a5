import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Common } from '../motion/worldTrack.ts';
import type { Finding, KeyValue } from '../sheet/result.ts';
import { measured } from '../uncertainty/measured.ts';
import { commonSources } from './commonSources.ts';

export interface Peaks {
  readonly keyValues: KeyValue[];
  readonly findings: Finding[];
}

/**
 * tip.peakSpeed and tip.peakAcceleration between release and extension: the largest magnitude of the vector at a frame, the
 * acceleration within the bandwidth of the window there.
 *
 * @param toS  extension, or the last frame where it was not seen
 */
export function peaksOf(
  { motion, bandwidthHz }: BodyMotion,
  fromS: number,
  toS: number,
  common: Common,
  extensionSeen: boolean,
): Peaks {
  const inside = motion.timeS.flatMap((t, i) => (t > fromS && t < toS ? [i] : []));
  if (inside.length === 0) return { keyValues: [], findings: [] };
  const speed = (i: number) => Math.hypot(motion.vxMps[i], motion.vyMps[i]);
  const acceleration = (i: number) => Math.hypot(motion.axMps2[i], motion.ayMps2[i]);
  const largest = (of: (i: number) => number) =>
    inside.reduce((best, i) => (of(i) > of(best) ? i : best), inside[0]);

  const s = largest(speed);
  const a = largest(acceleration);
  const until = extensionSeen ? 'extension' : 'the last frame in which the tip was seen';
  const along = (x: number, y: number, ux: number, uy: number, size: number) =>
    size > 0 ? Math.hypot((x / size) * ux, (y / size) * uy) : Math.hypot(ux, uy);
  const speedMps = speed(s);
  const aMps2 = acceleration(a);
  const keyValues = [
    measured(
      'tip.peakSpeed',
      speedMps,
      'm/s',
      [
        {
          source: 'positions and smoothing',
          u: along(motion.vxMps[s], motion.vyMps[s], motion.uVxMps[s], motion.uVyMps[s], speedMps),
        },
        { source: 'between frames', u: betweenFrames(speed, s, inside) },
        ...commonSources(common, speedMps, { length: 1, time: -1 }),
      ],
      { definition: `largest speed at a frame between release and ${until}` },
    ),
    measured(
      'tip.peakAcceleration',
      aMps2,
      'm/s2',
      [
        {
          source: 'positions and smoothing',
          u: along(motion.axMps2[a], motion.ayMps2[a], motion.uAxMps2[a], motion.uAyMps2[a], aMps2),
        },
        { source: 'between frames', u: betweenFrames(acceleration, a, inside) },
        ...commonSources(common, aMps2, { length: 1, time: -2 }),
      ],
      {
        bandwidthHz: bandwidthHz[a],
        definition: `largest magnitude of the acceleration at a frame between release and ${until}, within the stated bandwidth`,
      },
    ),
  ];

  const findings: Finding[] = [];
  const last = inside[inside.length - 1];
  const windowFrames = 0.5 / (bandwidthHz[a] * common.frameTimeS);
  if (a >= last - windowFrames) {
    findings.push({
      level: 'caution',
      code: 'peakAtEnd',
      text: `The tip's acceleration is still rising where ${until === 'extension' ? 'the tether comes straight' : 'the track ends'}: tip.peakAcceleration is what ${(1 / common.frameTimeS).toFixed(0)} frames per second and a bandwidth of ${bandwidthHz[a].toPrecision(2)} Hz can show of it, at least so much. A higher capture rate shows more.`,
    });
  }
  return { keyValues, findings };
}

/** What a peak may gain before or after the frame in which it is largest: the last step up to it, as a rectangle to one side. */
function betweenFrames(of: (i: number) => number, peak: number, inside: readonly number[]): number {
  const before = inside.includes(peak - 1) ? of(peak) - of(peak - 1) : 0;
  const after = inside.includes(peak + 1) ? of(peak) - of(peak + 1) : 0;
  const step = inside.includes(peak + 1) ? Math.min(before, after) : before;
  return Math.max(0, step) / Math.sqrt(3);
}
