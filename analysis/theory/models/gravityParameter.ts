import type { LocalGravity } from '../normalGravity.ts';
import type { Parameter } from './model.ts';

/** Local gravity as the site gives it. Its bounds are wide enough for a scale or a clock that is wrong by half. */
export function gravityParameter({ gMps2, uGMps2 }: LocalGravity): Parameter {
  return {
    name: 'gMps2',
    unit: 'm/s²',
    meaning: 'gravity',
    start: gMps2,
    bounds: [gMps2 / 2, gMps2 * 2],
    prior: { value: gMps2, u: uGMps2 },
  };
}
