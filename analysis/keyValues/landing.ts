import type { WorldTrack } from '../motion/worldTrack.ts';

/** A fall is compared with the one before it only where that one is this many standard uncertainties of a height long. */
const leastFallSigma = 40;
/** A body that falls freely or towards its terminal speed never falls less than in the equal time before; half is far from it. */
const slowedShare = 0.5;

/**
 * Until when a falling body surely has not met anything: two equal runs of frames before it is seen to have slowed to half,
 * whether it bounces, stays where it fell or is caught.
 *
 * @param releaseS  the body's release
 * @returns an instant [s]; Infinity when it is not seen to slow
 */
export function fallsFreelyUntil({ timeS, yM, uYM }: WorldTrack, releaseS: number): number {
  const first = timeS.findIndex((t) => t > releaseS);
  if (first < 0) return Number.POSITIVE_INFINITY;
  let run = 1;
  for (let i = first + 2; i < timeS.length; i++) {
    // The faster the fall the shorter the run that shows it: start from the last one's length.
    run = Math.max(1, run - 1);
    while (i - 2 * run > first && yM[i - 2 * run] - yM[i - run] < leastFallSigma * uYM[i]) run++;
    const a = i - 2 * run;
    const b = i - run;
    const before = yM[a] - yM[b];
    if (a < first || before < leastFallSigma * uYM[i]) continue;
    // Frames may be missing: compare speeds, not falls.
    const speedBefore = before / (timeS[b] - timeS[a]);
    const speedNow = (yM[b] - yM[i]) / (timeS[i] - timeS[b]);
    if (speedNow < slowedShare * speedBefore) return timeS[a];
  }
  return Number.POSITIVE_INFINITY;
}
