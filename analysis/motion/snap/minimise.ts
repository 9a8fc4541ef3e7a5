/** A function to be made small, with its gradient; infinite where it has no value. */
export type Objective = (at: Float64Array) => { readonly value: number; readonly gradient: Float64Array };

export interface Minimum {
  readonly at: Float64Array;
  readonly value: number;
  readonly gradient: Float64Array;
  readonly evaluations: number;
}

/** Steps longer than this in any unknown are cut: unknowns are logarithms. */
const longestStep = 4;
const mostEvaluations = 150;

/**
 * Quasi-Newton descent (Broyden, Fletcher, Goldfarb, Shanno) with halved steps; Nocedal & Wright 2006, ch. 6.
 *
 * @param inverseHessian  first guess, m × m, positive definite; it is changed
 * @param enough          the descent ends when a step promises less than this
 */
export function minimise(
  objective: Objective,
  start: Float64Array,
  inverseHessian: Float64Array,
  enough: number,
): Minimum {
  const m = start.length;
  const h = inverseHessian;
  let at = Float64Array.from(start);
  let { value, gradient } = objective(at);
  let evaluations = 1;
  const product = (v: Float64Array) => {
    const out = new Float64Array(m);
    for (let i = 0; i < m; i++) for (let j = 0; j < m; j++) out[i] += h[i * m + j] * v[j];
    return out;
  };
  while (evaluations < mostEvaluations) {
    const step = product(gradient).map((s) => -s);
    let promised = -dot(step, gradient) / 2;
    if (!(promised > enough)) break;
    const longest = step.reduce((most, s) => Math.max(most, Math.abs(s)), 0);
    let share = Math.min(1, longestStep / longest);
    promised *= 2;
    let next = at;
    let found = { value: Number.POSITIVE_INFINITY, gradient };
    while (evaluations < mostEvaluations) {
      next = at.map((a, i) => a + share * step[i]);
      found = objective(next);
      evaluations++;
      if (found.value <= value - 1e-4 * share * promised) break;
      share /= 3;
      if (share < 1e-6) return { at, value, gradient, evaluations };
    }
    if (!(found.value <= value)) break;
    const moved = next.map((a, i) => a - at[i]);
    const turned = found.gradient.map((g, i) => g - gradient[i]);
    const curvature = dot(moved, turned);
    if (curvature > 1e-10) {
      const hy = product(turned);
      const f = (1 + dot(turned, hy) / curvature) / curvature;
      for (let i = 0; i < m; i++)
        for (let j = 0; j < m; j++)
          h[i * m + j] += f * moved[i] * moved[j] - (hy[i] * moved[j] + moved[i] * hy[j]) / curvature;
    }
    at = next;
    ({ value, gradient } = found);
  }
  return { at, value, gradient, evaluations };
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
