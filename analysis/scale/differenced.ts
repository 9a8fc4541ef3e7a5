import type { Linearised } from '../fit/problem.ts';

/** Cube root of the rounding error of a double: with it a central difference of a smooth function is good to 1e-10. */
const step = 6e-6;

/** Residuals with derivatives by central differences, for parameters that matter on the scale of 1. Cost 2n + 1 evaluations. */
export function differenced(
  residuals: (parameters: Float64Array) => Float64Array,
  parameters: Float64Array,
): Linearised {
  const jacobian = Array.from(parameters, (value, j) => {
    const [below, above] = [parameters.slice(), parameters.slice()];
    below[j] = value - step;
    above[j] = value + step;
    const low = residuals(below);
    return residuals(above).map((r, i) => (r - low[i]) / (above[j] - below[j]));
  });
  return { residuals: residuals(parameters), jacobian };
}
