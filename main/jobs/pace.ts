import type { Progress } from './progress.ts';

/** Reports at most this often: a bar or a window shows no more. */
const leastGapMs = 100;

/**
 * Turns "frame done" into Progress reports at a bearable rate.
 *
 * @param nowMs  a monotonic clock
 */
export function startPace(
  phase: Progress['phase'],
  report: (progress: Progress) => void,
  nowMs: () => number = () => performance.now(),
): { frameDone(framesDone: number, framesTotal: number | null): void } {
  const startMs = nowMs();
  let reportedMs = Number.NEGATIVE_INFINITY;
  return {
    frameDone(framesDone, framesTotal) {
      const now = nowMs();
      if (now - reportedMs < leastGapMs && framesDone !== framesTotal) return;
      reportedMs = now;
      const rateHz = framesDone / Math.max((now - startMs) / 1000, 1e-3);
      const timeLeftS =
        framesTotal === null || rateHz === 0 ? null : Math.max(0, (framesTotal - framesDone) / rateHz);
      report({ phase, framesDone, framesTotal, rateHz, timeLeftS });
    },
  };
}
