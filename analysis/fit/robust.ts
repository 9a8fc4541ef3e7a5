import { leastSquares, type NoSolution, type Solution } from './leastSquares.ts';
import type { Problem } from './problem.ts';

/**
 * How much a standardised residual counts. Huber: fully up to 1.345, then ever less (95 % of the efficiency of least squares on
 * normal errors; Huber 1964). Student: after a t distribution of 4 degrees of freedom, so that gross errors hardly count.
 */
export type Robust = 'huber' | 'student';

const huberAt = 1.345;
const studentDof = 4;

const weightOf: Readonly<Record<Robust, (residual: number) => number>> = {
  huber: (r) => (Math.abs(r) <= huberAt ? 1 : huberAt / Math.abs(r)),
  student: (r) => (studentDof + 1) / (studentDof + r * r),
};

const mostRounds = 100;
/** Weights are settled when the parameters move by less than this share of their uncertainty. */
const settledShare = 1e-6;

/**
 * Least squares with weights after the residuals, by repeated weighted fits. The covariance is widened by what the weights cost:
 * mean(ψ²)/mean(ψ')² (Huber, Robust Statistics 1981, 7.6). `chiSquared` and residuals stay the plain ones.
 *
 * @param dataRows  the first residuals that are data; those below (priors) always count fully
 */
export function robustFit(problem: Problem, kind: Robust, dataRows: number): Solution | NoSolution {
  let found = leastSquares(problem);
  if ('reason' in found) return found;
  let start = found.parameters;
  for (let round = 0; round < mostRounds; round++) {
    const root = found.at.residuals.map((r, i) => (i < dataRows ? Math.sqrt(weightOf[kind](r)) : 1));
    const weighted = (rows: Float64Array) => rows.map((r, i) => r * root[i]);
    const next: Solution | NoSolution = leastSquares({
      ...problem,
      start,
      residuals: (p) => weighted(problem.residuals(p)),
      linearised(p) {
        const at = problem.linearised(p);
        return { residuals: weighted(at.residuals), jacobian: at.jacobian.map(weighted) };
      },
    });
    if ('reason' in next) return next;
    const moved = Math.max(
      ...Array.from(next.parameters, (value, j) => {
        const u = Math.sqrt(next.covariance[j][j]);
        return u > 0 && Number.isFinite(u) ? Math.abs(value - start[j]) / u : 0;
      }),
    );
    start = next.parameters;
    const at = problem.linearised(start);
    found = { ...next, at, chiSquared: at.residuals.reduce((sum, r) => sum + r * r, 0) };
    if (moved < settledShare) return widened(found, kind, dataRows);
  }
  return { reason: `the robust weights did not settle within ${mostRounds} rounds` };
}

/** From the inverse of the weighted normal equations to the covariance of the estimate. */
function widened(found: Solution, kind: Robust, dataRows: number): Solution {
  let squared = 0;
  let slope = 0;
  let weights = 0;
  const h = 1e-4;
  for (const r of found.at.residuals.subarray(0, dataRows)) {
    const psi = (x: number) => x * weightOf[kind](x);
    squared += psi(r) ** 2;
    slope += (psi(r + h) - psi(r - h)) / (2 * h);
    weights += weightOf[kind](r);
  }
  // (JᵀWJ)⁻¹ is (JᵀJ)⁻¹/mean(w) as far as weights and derivatives are unrelated; Huber's is mean(ψ²)/mean(ψ')² (JᵀJ)⁻¹.
  const factor = (squared * weights) / (slope * slope);
  return { ...found, covariance: found.covariance.map((row) => row.map((value) => value * factor)) };
}
