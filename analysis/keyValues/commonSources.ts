import type { Common } from '../motion/worldTrack.ts';
import type { Contribution } from '../uncertainty/effectiveDof.ts';

/**
 * What the scale and the clock give to a value, by their powers in it: a length has length 1 and time 0, a speed 1 and -1, an
 * acceleration 1 and -2. Relative uncertainties times value times power.
 */
export function commonSources(
  common: Common,
  value: number,
  power: { readonly length: number; readonly time: number },
): Contribution[] {
  const length = common.length.map((l) => ({ source: l.source, u: Math.abs(l.uRel * power.length * value) }));
  const time = common.time.map((t) => ({ source: t.source, u: Math.abs(t.uRel * power.time * value) }));
  return [...length, ...time].filter((c) => c.u !== 0);
}

/** All relative uncertainties of length together. */
export function uLengthRel(common: Common): number {
  return Math.sqrt(common.length.reduce((s, l) => s + l.uRel * l.uRel, 0));
}
