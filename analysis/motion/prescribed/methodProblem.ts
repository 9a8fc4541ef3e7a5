import type { MotionSettings } from '../../sheet/motionSettings.ts';
import type { Finding } from '../../sheet/result.ts';
import type { WorldTrack } from '../worldTrack.ts';
import { unevenAt } from './evenTimes.ts';
import { prescribedBy } from './methodOf.ts';

/** Why the method that the sheet prescribes cannot be used at this frame rate; null when it can. */
export function rateProblem(settings: MotionSettings | undefined, frameRateHz: number): Finding | null {
  const problem = (settings && prescribedBy(settings)?.rateProblem(frameRateHz)) ?? null;
  return problem === null ? null : stop(`motion: ${problem}.`);
}

/** Why the method that the sheet prescribes cannot be used on these tracks; null when it can. */
export function methodProblem(
  settings: MotionSettings | undefined,
  tracks: readonly WorldTrack[],
  frameTimeS: number,
): Finding | null {
  const method = settings && prescribedBy(settings);
  if (!settings || !method) return null;
  const slow = rateProblem(settings, 1 / frameTimeS);
  if (slow || !method.needsEvenTimes) return slow;
  for (const { bodyId, timeS, frame } of tracks) {
    const i = unevenAt(timeS);
    if (i === null) continue;
    const why =
      frame[i + 1] - frame[i] > 1
        ? `body ${bodyId} is not measured in frame ${frame[i] + 1}`
        : `the step after frame ${frame[i]} is ${((timeS[i + 1] - timeS[i]) * 1000).toPrecision(5)} ms instead of ${(frameTimeS * 1000).toPrecision(5)} ms`;
    return stop(
      `motion.method "${settings.method}" needs frames at even times without gaps, and ${why}; prescribe localPolynomial, quinticSpline, centralDifference or adaptive, or set the body by hand there.`,
    );
  }
  return null;
}

function stop(text: string): Finding {
  return { level: 'stop', code: 'methodUnfit', text };
}
