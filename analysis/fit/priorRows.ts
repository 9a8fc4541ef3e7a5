import type { Linearised, Problem } from './problem.ts';

/** What was known of a parameter before; null where nothing was. u = 0 holds it at the value. */
export interface PriorOf {
  readonly value: number;
  readonly u: number;
}

/**
 * A problem with what is known of its parameters as further residuals, (parameter - value)/u: they stand below the data's. A
 * parameter with u = 0 is held.
 */
export function withPriors(problem: Problem, priors: readonly (PriorOf | null)[]): Problem {
  const rows = priors.flatMap((prior, j) => (prior !== null && prior.u > 0 ? [{ j, ...prior }] : []));
  const append = (data: Float64Array, below: (row: (typeof rows)[number]) => number) => {
    const all = new Float64Array(data.length + rows.length);
    all.set(data);
    rows.forEach((row, k) => {
      all[data.length + k] = below(row);
    });
    return all;
  };
  const residuals = (data: Float64Array, p: Float64Array) =>
    append(data, ({ j, value, u }) => (p[j] - value) / u);
  return {
    start: problem.start.map((value, j) => (priors[j]?.u === 0 ? priors[j].value : value)),
    bounds: problem.bounds.map((bounds, j) =>
      priors[j]?.u === 0 ? [priors[j].value, priors[j].value] : bounds,
    ),
    residuals: (p) => residuals(problem.residuals(p), p),
    linearised(p): Linearised {
      const data = problem.linearised(p);
      return {
        residuals: residuals(data.residuals, p),
        jacobian: data.jacobian.map((column, k) => append(column, ({ j, u }) => (j === k ? 1 / u : 0))),
      };
    },
  };
}
