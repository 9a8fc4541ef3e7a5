import { leastSquares, type Solution } from './leastSquares.ts';
import type { Problem } from './problem.ts';

export interface Profile {
  /** Ascending values of the parameter, and the smallest sum of squares with it held there. */
  readonly values: readonly number[];
  readonly chiSquared: readonly number[];
  /** Where the sum of squares is 3.841 above its least: 95 % of one degree of freedom. null: not within the bounds. */
  readonly from: number | null;
  readonly to: number | null;
}

/** The 95 % point of chi-squared with one degree of freedom, 1.959964². */
const rise95 = 3.841459;
/** The curve is followed to here, so that its shape beyond the interval is seen. */
const riseToShow = 9;
const stepsPerU = 2;
const mostSteps = 60;

/**
 * Profile likelihood of one parameter: where the sum of squares is not a parabola, this interval is right and ± 1.96 u is not
 * (Venzon & Moolgavkar 1988).
 *
 * Cost up to 120 fits, each started at its neighbour.
 */
export function profile(problem: Problem, solution: Solution, index: number): Profile {
  const best = solution.parameters[index];
  const [least, most] = problem.bounds[index];
  const u = Math.sqrt(solution.covariance[index][index]);
  const step = (Number.isFinite(u) && u > 0 ? u : (most - least) / mostSteps) / stepsPerU;
  const below = side(problem, solution, index, -step, best - least);
  const above = side(problem, solution, index, step, most - best);
  const points = [...below.reverse(), { value: best, chiSquared: solution.chiSquared }, ...above];
  const crossing = (outward: readonly { value: number; chiSquared: number }[]) => {
    // The root of the rise is nearly straight: interpolate in it.
    const root = (c: number) => Math.sqrt(Math.max(0, c - solution.chiSquared));
    for (let i = 1; i < outward.length; i++) {
      const [a, b] = [root(outward[i - 1].chiSquared), root(outward[i].chiSquared)];
      if (b < Math.sqrt(rise95)) continue;
      const share = (Math.sqrt(rise95) - a) / (b - a);
      return outward[i - 1].value + share * (outward[i].value - outward[i - 1].value);
    }
    return null;
  };
  const middle = below.length;
  return {
    values: points.map((p) => p.value),
    chiSquared: points.map((p) => p.chiSquared),
    from: crossing(points.slice(0, middle + 1).reverse()),
    to: crossing(points.slice(middle)),
  };
}

/** Points outward on one side, until the sum of squares has risen enough or the bound is reached. */
function side(problem: Problem, solution: Solution, index: number, step: number, room: number) {
  const points: { value: number; chiSquared: number }[] = [];
  let start = solution.parameters;
  for (let k = 1; k <= mostSteps; k++) {
    const last = k * Math.abs(step) >= room;
    const value = solution.parameters[index] + (last ? Math.sign(step) * room : k * step);
    const at = start.slice();
    at[index] = value;
    const bounds = problem.bounds.map((b, j) => (j === index ? ([value, value] as const) : b));
    const found = leastSquares({ ...problem, start: at, bounds });
    if ('reason' in found) break;
    points.push({ value, chiSquared: found.chiSquared });
    start = found.parameters;
    if (last || found.chiSquared - solution.chiSquared > riseToShow) break;
  }
  return points;
}
