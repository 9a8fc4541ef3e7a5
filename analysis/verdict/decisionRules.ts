import type { SheetLimit } from '../sheet/sheet.ts';

export type Outcome = 'pass' | 'fail' | 'undecided';

/** Decides for one side from the distance to the limit (positive: inside) and the expanded uncertainty. */
type DecisionRule = (insideBy: number, U95: number) => Outcome;

/**
 * The decision rules, by the name that the sheet uses.
 *
 * `guarded`: guard band w = U95 on both sides of the limit, so a pass and a fail each hold with at least 97.5 % confidence
 * (JCGM 106:2012, 8.3; ILAC-G8:09/2019, 4.2). `simple`: the value against the limit (simple acceptance, JCGM 106:2012, 8.2).
 */
export const decisionRules: Readonly<Record<SheetLimit['rule'], DecisionRule>> = {
  guarded: (insideBy, U95) => (insideBy >= U95 ? 'pass' : insideBy < -U95 ? 'fail' : 'undecided'),
  simple: (insideBy) => (insideBy >= 0 ? 'pass' : 'fail'),
};
