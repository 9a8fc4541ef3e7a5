import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import type { Cells } from './cells.ts';
import type { Information } from './information.ts';
import { type Minimum, minimise } from './minimise.ts';
import { type Posterior, posterior } from './posterior.ts';

/** What the data are to a density: normal equations on cells, with the factor on their variances. */
export interface Data {
  readonly cells: Cells;
  readonly positions: Information;
  readonly noise: number;
  /** Observations whose uncertainty stays as it is: rest before the piece. */
  readonly fixed: Information;
  /** Acceleration at the start that `fixed` was worked out with [m/s²]. */
  readonly startMps2: number;
}

/** What is held of the log density before the data: not far from `middle`, and how much it changes from knot to knot. */
export interface Prior {
  readonly knots: number;
  readonly middle: number;
  /** Standard deviation of the change of the log density from one knot to the next. */
  readonly change: number;
}

/** Log density of the snap, piecewise linear between even knots over 0 … 1, at its most probable. */
export interface Density {
  readonly knots: Float64Array;
  readonly posterior: Posterior;
  /** Principal directions of what the knots are uncertain by: unit vector times standard deviation. */
  readonly directions: readonly Float64Array[];
  /** Log probability of the data given the prior's change, by Laplace's approximation. */
  readonly logEvidence: number;
}

/** How sure the middle of the log density is beforehand: bandwidths a hundredth to a hundred times are two deviations off. */
const middleDeviation = 18;
const enough = 0.01;
/** Step of the knots for second derivatives. */
const hessianStep = 0.25;

export function interpolated(knots: Float64Array, at: number): number {
  const last = knots.length - 1;
  const s = Math.min(1, Math.max(0, at)) * last;
  const k = Math.min(Math.max(0, last - 1), Math.floor(s));
  return last === 0 ? knots[0] : knots[k] + (s - k) * (knots[k + 1] - knots[k]);
}

/** Log density at the middle of each cell. */
export function densityOfCells({ edges, count }: Cells, knots: Float64Array): Float64Array {
  return Float64Array.from({ length: count }, (_, j) => interpolated(knots, (edges[j] + edges[j + 1]) / 2));
}

export function posteriorOf({ cells, positions, noise, fixed }: Data, knots: Float64Array): Posterior | null {
  return posterior(cells, positions, noise, fixed, densityOfCells(cells, knots));
}

/** The most probable density, without its uncertainty. */
export function mostProbable(data: Data, prior: Prior, start: Float64Array): Minimum {
  return minimise((knots) => cost(data, prior, knots), start, priorInverse(prior), enough);
}

/** The most probable density with its uncertainty. Cost some 100 + 2 × knots times that of a `posterior`. */
export function densityOf(data: Data, prior: Prior, start: Float64Array): Density | null {
  const m = prior.knots;
  const found = mostProbable(data, prior, start);
  const best = posteriorOf(data, found.at);
  if (!best) return null;
  const hessian = Matrix.zeros(m, m);
  for (let k = 0; k < m; k++) {
    const up = Float64Array.from(found.at);
    const down = Float64Array.from(found.at);
    up[k] += hessianStep;
    down[k] -= hessianStep;
    const [a, b] = [cost(data, prior, up).gradient, cost(data, prior, down).gradient];
    for (let i = 0; i < m; i++) {
      const second = (a[i] - b[i]) / (4 * hessianStep);
      hessian.set(k, i, hessian.get(k, i) + second);
      hessian.set(i, k, hessian.get(i, k) + second);
    }
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(hessian, {
    assumeSymmetric: true,
  });
  // A knot that neither data nor neighbours hold is known no better than the prior's middle.
  const curvatures = realEigenvalues.map((e) => Math.max(e, 1 / middleDeviation ** 2));
  const logVolume = curvatures.reduce((sum, e) => sum - 0.5 * Math.log(e), 0);
  return {
    knots: found.at,
    posterior: best,
    directions: curvatures.map((e, k) =>
      Float64Array.from({ length: m }, (_, i) => eigenvectorMatrix.get(i, k) / Math.sqrt(e)),
    ),
    logEvidence: -found.value - (m - 1) * Math.log(prior.change) + logVolume,
  };
}

function cost(data: Data, prior: Prior, knots: Float64Array) {
  const m = knots.length;
  const gradient = new Float64Array(m);
  const found = posteriorOf(data, knots);
  if (!found) return { value: Number.POSITIVE_INFINITY, gradient };
  let value = -found.logEvidence;
  const { edges, count } = data.cells;
  for (let j = 0; j < count; j++) {
    const s = Math.min(1, Math.max(0, (edges[j] + edges[j + 1]) / 2)) * (m - 1);
    const k = Math.min(Math.max(0, m - 2), Math.floor(s));
    gradient[k] -= (1 - (s - k)) * found.slope[j];
    if (m > 1) gradient[k + 1] -= (s - k) * found.slope[j];
  }
  const mean = knots.reduce((sum, v) => sum + v, 0) / m;
  const off = (mean - prior.middle) / middleDeviation ** 2;
  value += 0.5 * off * (mean - prior.middle);
  const weight = 1 / prior.change ** 2;
  for (let k = 0; k < m; k++) {
    gradient[k] += off / m;
    if (k === 0) continue;
    const rise = knots[k] - knots[k - 1];
    value += 0.5 * weight * rise * rise;
    gradient[k] += weight * rise;
    gradient[k - 1] -= weight * rise;
  }
  return { value, gradient };
}

/** Inverse of the prior's curvature with half a degree of freedom added to each knot: a first guess for the descent. */
function priorInverse({ knots: m, change }: Prior): Float64Array {
  const curvature = Matrix.zeros(m, m);
  const weight = 1 / change ** 2;
  for (let k = 0; k < m; k++) {
    const inner = (k > 0 ? 1 : 0) + (k < m - 1 ? 1 : 0);
    curvature.set(k, k, inner * weight + 0.3);
    if (k > 0) {
      curvature.set(k, k - 1, -weight);
      curvature.set(k - 1, k, -weight);
    }
  }
  const { realEigenvalues: e, eigenvectorMatrix: v } = new EigenvalueDecomposition(curvature, {
    assumeSymmetric: true,
  });
  const out = new Float64Array(m * m);
  for (let i = 0; i < m; i++)
    for (let j = 0; j < m; j++)
      for (let k = 0; k < m; k++) out[i * m + j] += (v.get(i, k) * v.get(j, k)) / e[k];
  return out;
}
