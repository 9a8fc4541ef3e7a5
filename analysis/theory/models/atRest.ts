import type { Fall } from './model.ts';

/** A fall of n instants in which nothing has happened yet. */
export function atRest(n: number, untilS: number): Fall {
  return { yM: new Float64Array(n), vyMps: new Float64Array(n), ayMps2: new Float64Array(n), untilS };
}
