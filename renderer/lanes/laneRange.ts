import type { LaneData } from '../state/lanes.ts';

/**
 * The range of values of a lane over the shown time: that of the bodies' curves. Single differences are noisier and models may
 * run away (the momentum form has no bound): they are cut off at the lane's edge rather than flatten what was measured.
 */
export function laneRange(lane: LaneData, fromS: number, toS: number): { min: number; max: number } {
  let min = Number.POSITIVE_INFINITY;
  let max = Number.NEGATIVE_INFINITY;
  for (const { timeS, value } of lane.traces)
    for (let i = 0; i < timeS.length; i++) {
      const v = value[i] ?? Number.NaN;
      const t = timeS[i] ?? Number.NaN;
      if (!Number.isFinite(v) || t < fromS || t > toS) continue;
      if (v < min) min = v;
      if (v > max) max = v;
    }
  if (min > max) return { min: -1, max: 1 };
  const room = (max - min || Math.abs(max) || 1) * 0.08;
  return { min: min - room, max: max + room };
}
