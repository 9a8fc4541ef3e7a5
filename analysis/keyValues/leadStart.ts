import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Release } from '../motion/release.ts';
import type { KeyValue } from '../sheet/result.ts';
import { measured } from '../uncertainty/measured.ts';
import { between, stepBefore } from './alongMotion.ts';

/** The lead is significant where it is more than so many of its standard uncertainties: a chance of 2.3 % to either side. */
const significant = 2;
/** It must stay so for the rest, and for at least so many frames. */
const leastFrames = 3;

/**
 * tip.leadTime: from release of the tip to the first frame from which on the tip is significantly ahead of the reference body, each
 * measured from its own start. Being ahead for a frame or two and falling back is noise.
 *
 * @param untilS   end of what both bodies do undisturbed: extension, or the reference body's landing
 * @param frameOf  number of the frame at a time of the tip's motion
 * @returns null when the tip is not significantly ahead at the end
 */
export function leadStart(
  tip: BodyMotion,
  ball: BodyMotion,
  tipRelease: Release,
  ballRelease: Release,
  untilS: number,
  frameTimeS: number,
  frameOf: (timeS: number) => number,
): KeyValue | null {
  const leads = tip.motion.timeS.flatMap((timeS, i) => {
    if (timeS <= tipRelease.timeS || timeS > untilS) return [];
    const k = stepBefore(ball.motion.timeS, timeS);
    if (k === null) return [];
    const { yM, vyMps, uYM } = ball.motion;
    const ballDropM = ballRelease.yM - between(ball.motion.timeS, yM, vyMps, k, timeS).value;
    const leadM = tipRelease.yM - tip.motion.yM[i] - ballDropM;
    const uM = Math.hypot(tip.motion.uYM[i], Math.max(uYM[k], uYM[k + 1]), tipRelease.uYM, ballRelease.uYM);
    return [{ timeS, leadM, uM }];
  });
  let first = leads.length;
  while (first > 0 && leads[first - 1].leadM > significant * leads[first - 1].uM) first--;
  if (leads.length - first < leastFrames) return null;
  const { timeS, leadM, uM } = leads[first];
  const before = leads[first - 1];
  // The lead grows by itself: how much later or earlier it would have crossed with an error of its own uncertainty.
  const later = leads[Math.min(leads.length - 1, first + leastFrames)];
  const rateMps = Math.max((later.leadM - leadM) / (later.timeS - timeS), 0);
  const byLead = rateMps > 0 ? uM / rateMps : timeS - tipRelease.timeS;
  const sinceS = before ? timeS - before.timeS : frameTimeS;
  return measured(
    'tip.leadTime',
    timeS - tipRelease.timeS,
    's',
    [
      { source: 'lead of the tip', u: Math.min(byLead, timeS - tipRelease.timeS) },
      { source: 'between frames', u: sinceS / Math.sqrt(12) },
      { source: 'instant of release', u: tipRelease.uTimeS },
    ],
    {
      definition: `from release of the tip to the first frame (${frameOf(timeS)}) from which on its lead is more than ${significant} standard uncertainties`,
    },
  );
}
