import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Common } from '../motion/worldTrack.ts';
import type { MotionInterval } from '../sheet/motionSettings.ts';
import type { Finding, KeyValue, Motion } from '../sheet/result.ts';
import { measured } from '../uncertainty/measured.ts';
import { accelerationAt, between, stepBefore } from './alongMotion.ts';
import { commonSources } from './commonSources.ts';

/** Where a body's times may count from; null where the event was not seen. */
export interface Zeros {
  readonly release: number | null;
  readonly extension: number | null;
  readonly clock: 0;
}

/**
 * Mean and largest acceleration over one stated interval. The mean is the change of the velocity over the time, which no bandwidth
 * touches; the largest is the magnitude at a frame, within the bandwidth there.
 *
 * @param number  place of the interval in the sheet, from 1
 */
export function intervalValues(
  { motion, bandwidthHz }: BodyMotion,
  interval: MotionInterval,
  number: number,
  zeros: Zeros,
  common: Common,
): { keyValues: KeyValue[]; findings: Finding[] } {
  const { body, zero } = interval;
  const zeroS = zeros[zero];
  const where = `motion.intervals[${number - 1}] (${interval.fromS} to ${interval.toS} s from ${zero === 'clock' ? 'zero of the clock' : zero})`;
  if (zeroS === null) return missed(`${where}: ${zero} was not seen, so nothing can be given for it.`);
  const fromS = zeroS + interval.fromS;
  const toS = zeroS + interval.toS;
  const first = velocityAt(motion, fromS);
  const last = velocityAt(motion, toS);
  if (!first || !last) {
    const { timeS } = motion;
    return missed(
      `${where}: body ${body} is followed from ${(timeS[0] - zeroS).toFixed(4)} to ${(timeS[timeS.length - 1] - zeroS).toFixed(4)} s, so nothing can be given for it.`,
    );
  }
  const durationS = toS - fromS;
  const mean = {
    x: (last.x - first.x) / durationS,
    y: (last.y - first.y) / durationS,
  };
  const meanMps2 = Math.hypot(mean.x, mean.y);
  const share = meanMps2 > 0 ? { x: mean.x / meanMps2, y: mean.y / meanMps2 } : { x: 1, y: 1 };
  const uAlong = (v: Velocity) => Math.hypot(share.x * v.ux, share.y * v.uy) / durationS;
  const stated = `${interval.fromS} to ${interval.toS} s from ${zero === 'clock' ? 'zero of the clock' : zero}`;
  const keyValues = [
    measured(
      `${body}.meanAcceleration.${number}`,
      meanMps2,
      'm/s2',
      [
        { source: 'velocity at the start of the interval', u: uAlong(first) },
        { source: 'velocity at its end', u: uAlong(last) },
        ...commonSources(common, meanMps2, { length: 1, time: -2 }),
      ],
      { definition: `magnitude of the change of velocity over time, ${stated}` },
    ),
  ];
  const inside = motion.timeS.flatMap((t, i) => (t >= fromS && t <= toS ? [i] : []));
  if (inside.length > 0) {
    const largest = inside.reduce((best, i) =>
      accelerationAt(motion, i).value > accelerationAt(motion, best).value ? i : best,
    );
    const { value, u } = accelerationAt(motion, largest);
    keyValues.push(
      measured(
        `${body}.maxAcceleration.${number}`,
        value,
        'm/s2',
        [{ source: 'positions and smoothing', u }, ...commonSources(common, value, { length: 1, time: -2 })],
        {
          bandwidthHz: bandwidthHz[largest],
          definition: `largest magnitude of the acceleration at a frame, ${stated}, within the stated bandwidth`,
        },
      ),
    );
  }
  return { keyValues, findings: [] };
}

interface Velocity {
  readonly x: number;
  readonly y: number;
  readonly ux: number;
  readonly uy: number;
}

function velocityAt(motion: Motion, atS: number): Velocity | null {
  const { timeS, vxMps, vyMps, axMps2, ayMps2, uVxMps, uVyMps } = motion;
  const i = stepBefore(timeS, atS);
  if (i === null) return null;
  return {
    x: between(timeS, vxMps, axMps2, i, atS).value,
    y: between(timeS, vyMps, ayMps2, i, atS).value,
    ux: Math.max(uVxMps[i], uVxMps[i + 1]),
    uy: Math.max(uVyMps[i], uVyMps[i + 1]),
  };
}

function missed(text: string): { keyValues: KeyValue[]; findings: Finding[] } {
  return { keyValues: [], findings: [{ level: 'caution', code: 'intervalNotCovered', text }] };
}
