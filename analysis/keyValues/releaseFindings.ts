import type { Release } from '../motion/release.ts';
import type { WorldTrack } from '../motion/worldTrack.ts';
import type { Finding } from '../sheet/result.ts';

/** Fewer rest frames than this leave the instant of release to the assumption that the body started from rest. */
const leastRestFrames = 3;

/** What is to be said of a body's release: not found, or worked back without having been seen at rest. */
export function releaseFindings(track: WorldTrack, release: Release | null): Finding[] {
  if (track.role === 'other') return [];
  if (!release) {
    return [
      {
        level: 'caution',
        code: 'releaseNotFound',
        text: `No release of body ${track.bodyId} was found: it is not seen to start falling.`,
      },
    ];
  }
  if (release.restFrames >= leastRestFrames) return [];
  return [
    {
      level: 'caution',
      code: 'restNotSeen',
      text: `Only ${release.restFrames} ${release.restFrames === 1 ? 'frame shows' : 'frames show'} body ${track.bodyId} at rest: its release is worked back on the assumption that it started from rest. Film at least ${leastRestFrames} frames before release.`,
    },
  ];
}

/** Bodies meant to be let go together: a difference beyond its uncertainty moves the lead by the speed gained in it. */
export function releaseDifference(tip: Release, ball: Release): Finding[] {
  const apartS = tip.timeS - ball.timeS;
  const u = Math.hypot(tip.uTimeS, ball.uTimeS);
  const earlier = apartS < 0 ? 'before' : 'after';
  const ms = Math.abs(apartS * 1000).toPrecision(2);
  if (Math.abs(apartS) <= Math.max(3 * u, 2e-4)) return [];
  return [
    {
      level: Math.abs(apartS) > 0.002 ? 'caution' : 'note',
      code: 'releasesDiffer',
      text: `The tip was let go ${ms} ms ${earlier} the reference body (standard uncertainty ${(u * 1000).toPrecision(1)} ms).`,
    },
  ];
}
