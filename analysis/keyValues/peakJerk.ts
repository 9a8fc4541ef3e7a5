import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Common } from '../motion/worldTrack.ts';
import type { KeyValue } from '../sheet/result.ts';
import { measured } from '../uncertainty/measured.ts';
import { commonSources } from './commonSources.ts';

/** A jerk less than so many of its standard uncertainties cannot be had from the footage. */
const leastSigma = 2;

/**
 * tip.peakJerk: largest magnitude of the rate of change of the acceleration along the plumb line between release and extension, among
 * the frames at which it is more than twice its uncertainty.
 *
 * @returns null where the method gives no jerk, or the footage none that stands out of its uncertainty
 */
export function peakJerk(
  { motion, bandwidthHz, jerkY }: BodyMotion,
  fromS: number,
  toS: number,
  common: Common,
): KeyValue | null {
  const known = motion.timeS.flatMap((t, i) =>
    t > fromS && t < toS && Math.abs(jerkY.value[i]) > leastSigma * jerkY.u[i] ? [i] : [],
  );
  if (known.length === 0) return null;
  const peak = known.reduce((a, b) => (Math.abs(jerkY.value[b]) > Math.abs(jerkY.value[a]) ? b : a));
  const value = Math.abs(jerkY.value[peak]);
  return measured(
    'tip.peakJerk',
    value,
    'm/s3',
    [
      { source: 'positions and smoothing', u: jerkY.u[peak] },
      ...commonSources(common, value, { length: 1, time: -3 }),
    ],
    {
      bandwidthHz: bandwidthHz[peak],
      definition:
        'largest rate of change of the acceleration along the plumb line at a frame between release and the end of the fall, among those above twice their standard uncertainty; bandwidth of the acceleration there',
    },
  );
}
