import { covarianceOf } from './covariance.ts';
import type { Bounds, Linearised, Problem } from './problem.ts';
import { backSubstitute, triangular } from './triangular.ts';

export interface Solution {
  readonly parameters: Float64Array;
  /** Sum of squares of the standardised residuals. */
  readonly chiSquared: number;
  /** Residuals and their derivatives at the solution. */
  readonly at: Linearised;
  /**
   * Covariance for residuals of variance 1, as rows; infinite in the rows of parameters that the residuals do not settle, and 0 in
   * those that ended at a bound.
   */
  readonly covariance: readonly Float64Array[];
  /** Whether a parameter ended at a bound and would have gone on. */
  readonly atBound: readonly boolean[];
  readonly steps: number;
}

/** Why no solution was found, in words. */
export interface NoSolution {
  readonly reason: string;
}

export interface LeastSquaresOptions {
  readonly mostSteps?: number;
}

/** Damping at the start, in units of the scaled normal equations; larger is more careful. */
const startDamping = 1e-3;
const carefulDamping = 100;

/** The step that would still be made is this small against the parameters' own scale: converged to 10 digits or more. */
const settledStep = 1e-11;
/** Or the sum of squares would shrink by less than its rounding error. */
const settledReduction = 1e-15;

/**
 * Nonlinear least squares after Levenberg and Marquardt: each step solves [J; √λ D] δ = -[r; 0] by orthogonal reduction (never the
 * normal equations), D the largest column norms so far (Moré 1978), λ after the gain ratio (Nielsen 1999). Bounds: a parameter at
 * a bound that the gradient drives outward is left out of the step; a step is cut at the bounds.
 * A fit that ends on a plain where some parameter no longer matters has overshot: it is tried again with careful steps, and the
 * lower end counts.
 *
 * @throws RangeError if the start is outside the bounds or bounds exclude every value
 */
export function leastSquares(
  problem: Problem,
  { mostSteps = 500 }: LeastSquaresOptions = {},
): Solution | NoSolution {
  checkBounds(problem);
  const first = descend(problem, mostSteps, startDamping);
  if (!('reason' in first) && first.covariance.every((row, j) => Number.isFinite(row[j]))) return first;
  const careful = descend(problem, mostSteps, carefulDamping);
  if ('reason' in first) return careful;
  return 'reason' in careful || first.chiSquared <= careful.chiSquared ? first : careful;
}

function descend(problem: Problem, mostSteps: number, initialDamping: number): Solution | NoSolution {
  let parameters = problem.start.slice();
  let at = problem.linearised(parameters);
  let chiSquared = sumOfSquares(at.residuals);
  if (!Number.isFinite(chiSquared)) return { reason: 'the model has no value at the start of the fit' };
  const scale = new Float64Array(parameters.length);
  let damping = initialDamping;
  let growth = 2;
  let steps = 0;
  let settled = false;
  while (!settled && steps < mostSteps) {
    at.jacobian.forEach((column, j) => {
      scale[j] = Math.max(scale[j], norm(column));
    });
    const free = freeParameters(parameters, at, problem.bounds);
    if (free.length === 0) break;
    const { r, q } = triangular(
      free.map((j) => at.jacobian[j]),
      at.residuals,
    );
    for (;;) {
      const trial = parameters.slice();
      const room = free.map((j): Bounds => {
        const [least, most] = problem.bounds[j];
        return [least - parameters[j], most - parameters[j]];
      });
      boundedStep(
        r,
        q,
        free.map((j) => Math.sqrt(damping) * (scale[j] || 1)),
        room,
      ).forEach((step, k) => {
        const j = free[k];
        const [least, most] = problem.bounds[j];
        trial[j] = step <= room[k][0] ? least : step >= room[k][1] ? most : parameters[j] + step;
      });
      const moved = free.map((j) => trial[j] - parameters[j]);
      const predicted = predictedReduction(r, q, moved);
      const size = Math.max(
        ...free.map((j, k) => Math.abs(moved[k]) / (Math.abs(parameters[j]) + 1e-12 / (scale[j] || 1))),
      );
      if (size < settledStep || Math.abs(predicted) <= settledReduction * chiSquared) {
        settled = true;
        break;
      }
      // Cut at a bound a step may climb; a shorter one does not.
      if (predicted < 0) {
        damping *= growth;
        growth *= 2;
        continue;
      }
      steps++;
      const residuals = problem.residuals(trial);
      const sum = sumOfSquares(residuals);
      const gain = (chiSquared - sum) / predicted;
      if (gain > 0) {
        parameters = trial;
        at = problem.linearised(parameters);
        chiSquared = sum;
        damping = Math.max(1e-14, damping * Math.max(1 / 5, 1 - (2 * gain - 1) ** 3));
        growth = 2;
        break;
      }
      // Rounding alone may hide the last reduction: then there is nothing left to gain.
      if (predicted < 1e-10 * chiSquared && Math.abs(chiSquared - sum) < 1e-12 * chiSquared) {
        settled = true;
        break;
      }
      damping *= growth;
      growth *= 2;
      if (steps >= mostSteps || damping > 1e40) break;
    }
    if (damping > 1e40) break;
  }
  if (!settled && freeParameters(parameters, at, problem.bounds).length > 0) {
    return { reason: `the fit did not settle within ${mostSteps} steps` };
  }
  const free = new Set(freeParameters(parameters, at, problem.bounds));
  return {
    parameters,
    chiSquared,
    at,
    covariance: covarianceOf(at.jacobian, free),
    atBound: Array.from(parameters, (_, j) => !free.has(j)),
    steps,
  };
}

function checkBounds({ start, bounds }: Problem): void {
  bounds.forEach(([least, most], j) => {
    if (!(least <= most)) throw new RangeError(`leastSquares: bounds of parameter ${j} exclude every value`);
    if (!(start[j] >= least && start[j] <= most))
      throw new RangeError(`leastSquares: parameter ${j} starts at ${start[j]}, outside its bounds`);
  });
}

/** Parameters that may move: not those at a bound with a sum of squares that falls outward. */
function freeParameters(parameters: Float64Array, at: Linearised, bounds: readonly Bounds[]): number[] {
  return Array.from(parameters.keys()).filter((j) => {
    const [least, most] = bounds[j];
    if (least === most) return false;
    const slope = dot(at.jacobian[j], at.residuals);
    return !((parameters[j] <= least && slope > 0) || (parameters[j] >= most && slope < 0));
  });
}

/**
 * δ within its room that makes |R δ + q|² + |D δ|² small: components that would leave their room are set to its edge, one round after
 * the other, and the rest is solved anew.
 */
function boundedStep(
  r: readonly Float64Array[],
  q: Float64Array,
  damping: readonly number[],
  room: readonly Bounds[],
): Float64Array {
  const n = q.length;
  const step = new Float64Array(n);
  let open = Array.from(step.keys());
  while (open.length > 0) {
    const right = new Float64Array(2 * n);
    for (let i = 0; i < n; i++) {
      right[i] = -q[i];
      for (let k = i; k < n; k++) if (!open.includes(k)) right[i] -= r[i][k] * step[k];
    }
    const columns = open.map((k) => {
      const column = new Float64Array(2 * n);
      for (let i = 0; i <= k; i++) column[i] = r[i][k];
      column[n + k] = damping[k];
      return column;
    });
    const reduced = triangular(columns, right);
    const solved = backSubstitute(reduced.r, reduced.q);
    open.forEach((k, i) => {
      step[k] = within(room[k], solved[i]);
    });
    const staying = open.filter((k, i) => step[k] === solved[i]);
    if (staying.length === open.length) break;
    open = staying;
  }
  return step;
}

/** |q|² - |R δ + q|². */
function predictedReduction(r: readonly Float64Array[], q: Float64Array, step: readonly number[]): number {
  let before = 0;
  let after = 0;
  for (let i = 0; i < q.length; i++) {
    let value = q[i];
    for (let j = i; j < q.length; j++) value += r[i][j] * step[j];
    before += q[i] * q[i];
    after += value * value;
  }
  return before - after;
}

const within = ([least, most]: Bounds, value: number) => Math.min(most, Math.max(least, value));
const sumOfSquares = (values: Float64Array) => dot(values, values);
const norm = (values: Float64Array) => Math.sqrt(sumOfSquares(values));

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
