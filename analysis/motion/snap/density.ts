import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import type { Cells } from './cells.ts';
import type { Information } from './information.ts';
import { type Between, interpolated, type Places } from './knots.ts';
import { type Minimum, minimise } from './minimise.ts';
import { type Posterior, posterior } from './posterior.ts';

/** What the data are to a density: normal equations on cells, with the factor on their variances. */
export interface Data {
  readonly cells: Cells;
  readonly places: Places;
  /** Where the cells' middles lie between the knots. */
  readonly between: Between;
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

/** Log density of the snap, piecewise linear between its knots, at its most probable. */
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
/**
 * The most probable density of a curve that is nearly a cubic would be none at all, and its uncertainty too small with it: a prior
 * that rises with the square root of the density keeps off zero by about a standard deviation (Chung et al., Psychometrika 78 (2013)
 * 685).
 */
const awayFromZero = 0.4;
const enough = 0.01;
/** Step of the knots for second derivatives. */
const hessianStep = 0.25;

export function posteriorOf(
  { cells, between, positions, noise, fixed }: Data,
  knots: Float64Array,
): Posterior | null {
  return posterior(cells, positions, noise, fixed, interpolated(between, knots));
}

/** The most probable density, without its uncertainty. */
export function mostProbable(data: Data, prior: Prior, start: Float64Array): Minimum {
  return minimise((knots) => cost(data, prior, knots), start, priorInverse(prior), enough);
}

/** The most probable density with its uncertainty. Cost some 100 + knots times that of a `posterior`. */
export function densityOf(data: Data, prior: Prior, start: Float64Array): Density | null {
  const m = prior.knots;
  const found = mostProbable(data, prior, start);
  const best = posteriorOf(data, found.at);
  if (!best) return null;
  const hessian = Matrix.zeros(m, m);
  for (let k = 0; k < m; k++) {
    const up = Float64Array.from(found.at);
    up[k] += hessianStep;
    const { gradient } = cost(data, prior, up);
    for (let i = 0; i < m; i++) {
      const second = (gradient[i] - found.gradient[i]) / (2 * hessianStep);
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
  const { knot, share } = data.between;
  for (let j = 0; j < share.length; j++) {
    gradient[knot[j]] -= (1 - share[j]) * found.slope[j];
    gradient[knot[j] + 1] -= share[j] * found.slope[j];
  }
  const mean = knots.reduce((sum, v) => sum + v, 0) / m;
  const off = (mean - prior.middle) / middleDeviation ** 2;
  value += 0.5 * off * (mean - prior.middle);
  value -= awayFromZero * mean;
  const weight = 1 / prior.change ** 2;
  for (let k = 0; k < m; k++) {
    gradient[k] += (off - awayFromZero) / m;
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
