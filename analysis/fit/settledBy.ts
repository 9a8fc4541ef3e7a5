import type { PriorOf } from './priorRows.ts';
import type { Bounds } from './problem.ts';

/**
 * What settles a parameter after a fit: `held` was not free; `footage` told it (its uncertainty is less than half of what was known
 * before, or nothing was known and it is settled); `both` share it; `sheet`: the footage adds nothing to what was stated;
 * `nothing`: neither settles it, its value means nothing.
 */
export type SettledBy = 'held' | 'footage' | 'both' | 'sheet' | 'nothing';

const mostlyFootage = 0.5;
const mostlySheet = 0.9;

/** @param u  standard uncertainty after the fit, infinite where the residuals do not settle the parameter */
export function settledBy(
  u: number,
  prior: PriorOf | null,
  [least, most]: Bounds,
  atBound: boolean,
): SettledBy {
  if (prior?.u === 0 || least === most) return 'held';
  if (atBound) return 'nothing';
  if (prior === null) {
    // An interval of ± 2 u that fills half of all that is possible says nothing.
    return Number.isFinite(u) && !(4 * u > (most - least) / 2) ? 'footage' : 'nothing';
  }
  const share = u / prior.u;
  if (share < mostlyFootage) return 'footage';
  return share < mostlySheet ? 'both' : 'sheet';
}
