/** Half the width of a peak at half its height. */
export interface PeakWidth {
  readonly halfWidthS: number;
  /** Sides on which the curve is seen to fall to half. */
  readonly sides: 0 | 1 | 2;
}

/**
 * Half width at half peak: from the peak to where the curve is half as high, mean of the two sides, or the one side that is seen.
 * Without either side it is the longer way to an end, and the peak is at least so wide.
 *
 * @param values  non-negative, at increasing times
 */
export function peakWidth(timeS: readonly number[], values: readonly number[], peak: number): PeakWidth {
  const ways = [-1, 1].map((step) => {
    const half = values[peak] / 2;
    let i = peak;
    while (i + step >= 0 && i + step < values.length && values[i + step] > half) i += step;
    const next = i + step;
    if (next < 0 || next >= values.length) return { seen: false, s: Math.abs(timeS[i] - timeS[peak]) };
    const share = (values[i] - half) / (values[i] - values[next]);
    return { seen: true, s: Math.abs(timeS[i] + share * (timeS[next] - timeS[i]) - timeS[peak]) };
  });
  const seen = ways.filter((w) => w.seen);
  if (seen.length === 0) return { halfWidthS: Math.max(ways[0].s, ways[1].s), sides: 0 };
  return {
    halfWidthS: seen.reduce((sum, w) => sum + w.s, 0) / seen.length,
    sides: seen.length === 2 ? 2 : 1,
  };
}
