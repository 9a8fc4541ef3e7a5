import type { Fall, Parameter, Values } from './model.ts';

/** Cube root of the rounding error of a double: the step of a central difference that balances rounding and curvature. */
const relativeStep = 6e-6;

/**
 * ∂y/∂parameter of a model without closed derivatives, by central differences; one-sided (of second order) where a bound is nearer
 * than the step.
 *
 * @param relativeNoise  relative error of the model's own curve where it is integrated numerically; the step is its cube root
 */
export function slopesByDifferences(
  fall: (sinceReleaseS: Float64Array, values: Values) => Fall,
  sinceReleaseS: Float64Array,
  values: Values,
  parameters: readonly Parameter[],
  relativeNoise = relativeStep ** 3,
): Float64Array[] {
  const share = Math.max(relativeStep, Math.cbrt(relativeNoise));
  return parameters.map(({ name, bounds: [least, most], prior }) => {
    // A held parameter is never moved: its slope is not worth two curves.
    if (prior?.u === 0) return new Float64Array(sinceReleaseS.length);
    const value = values[name];
    // A parameter near 0 has no size of its own; its prior's uncertainty is the next best.
    const step = share * Math.max(Math.abs(value), prior?.u ?? 0, 1e-3);
    const at = (v: number) => fall(sinceReleaseS, { ...values, [name]: v }).yM;
    if (value - step < least || value + step > most) {
      const h = value - step < least ? step : -step;
      const [y0, y1, y2] = [at(value), at(value + h), at(value + 2 * h)];
      return y0.map((y, i) => (-3 * y + 4 * y1[i] - y2[i]) / (2 * h));
    }
    const [below, above] = [at(value - step), at(value + step)];
    return above.map((y, i) => (y - below[i]) / (2 * step));
  });
}
