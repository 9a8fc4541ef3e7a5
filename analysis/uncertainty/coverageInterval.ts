export type IntervalKind = 'symmetric' | 'shortest';

/**
 * Coverage interval of drawn values: probabilistically symmetric (as much above as below), or the shortest that holds the share.
 *
 * @param sorted  ascending
 * @throws RangeError if the coverage is not between 0 and 1 or there are too few values for it
 * JCGM 101:2008, 7.7.
 */
export function coverageInterval(
  sorted: Float64Array,
  coverage: number,
  kind: IntervalKind,
): { readonly low: number; readonly high: number } {
  const n = sorted.length;
  // 7.7.2: q = pM rounded, the interval reaches from the r-th to the (r + q)-th value
  const q = Math.floor(coverage * n + 0.5);
  if (!(coverage > 0 && coverage < 1) || n < 2 || q >= n || q < 1) {
    throw new RangeError(`coverageInterval: ${n} values for a coverage of ${coverage}`);
  }
  let first = Math.floor((n - q) / 2);
  if (kind === 'shortest') {
    first = 0;
    for (let r = 1; r + q < n; r++)
      if (sorted[r + q] - sorted[r] < sorted[first + q] - sorted[first]) first = r;
  }
  return { low: sorted[first], high: sorted[first + q] };
}
