import type { Linearised } from './problem.ts';

/** Cube root of the rounding error of a double: with it a central difference is good to 1e-10 of its value. */
const relativeStep = 6.055454e-6;

/** Residuals with their derivatives by central differences, for residuals without closed ones. Cost 2n + 1 evaluations. */
export function linearisedByDifferences(
  residuals: (parameters: Float64Array) => Float64Array,
  parameters: Float64Array,
): Linearised {
  const jacobian = Array.from(parameters, (value, j) => {
    // A parameter that is 0 but for rounding has no size of its own.
    const step = relativeStep * (Math.abs(value) > 1e-9 ? Math.abs(value) : 1);
    const [below, above] = [parameters.slice(), parameters.slice()];
    below[j] = value - step;
    above[j] = value + step;
    // what was added after rounding, not what was meant to be
    const width = above[j] - below[j];
    const low = residuals(below);
    return residuals(above).map((r, i) => (r - low[i]) / width);
  });
  return { residuals: residuals(parameters), jacobian };
}
