import type { ForceRecord } from './parseForceRecord.ts';

/** Median of the magnitude of a standard normal variable. */
const normalMedian = 0.67449;

/**
 * Standard deviation of a record's noise from sample to sample [N], from its second differences: those of a smooth force are nothing
 * but noise, √6 times it, and their median is not moved by the whip at the end.
 */
export function forceNoise({ forceN }: ForceRecord): number {
  const second = forceN.slice(2).map((f, i) => Math.abs(f - 2 * forceN[i + 1] + forceN[i]));
  return second.sort()[second.length >> 1] / (normalMedian * Math.sqrt(6));
}
