import { plainNumbers } from './arithmetic.ts';
import { coverageInterval, type IntervalKind } from './coverageInterval.ts';
import { drawChiSquared, drawStandard, type RandomDraws } from './distribution.ts';
import { correlatedGroups, factorOf, inputCovariance, type Measurement } from './measurement.ts';
import { numericalTolerance } from './numericalTolerance.ts';

/** A budget by propagation of distributions. */
export interface MonteCarloResult {
  readonly mean: number;
  readonly u: number;
  readonly low: number;
  readonly high: number;
  readonly coverage: number;
  readonly interval: IntervalKind;
  readonly trials: number;
  /** Whether mean, u and both ends came to rest within the tolerance before the trials ran out. */
  readonly settled: boolean;
  readonly tolerance: number;
}

export interface MonteCarloOptions {
  readonly coverage?: number;
  readonly interval?: IntervalKind;
  /** Significant digits of u that are to be right: 1 or 2. */
  readonly digits?: 1 | 2;
  readonly blockTrials?: number;
  readonly mostTrials?: number;
}

/**
 * Propagation of distributions by the adaptive Monte Carlo procedure of JCGM 101:2008, 7.9: blocks of trials until twice the
 * standard deviation of the blocks' means, standard uncertainties and interval ends is below the numerical tolerance of u.
 *
 * @param draws  seeded by the caller: the same seed gives the same result
 * @throws RangeError if inputs or correlations cannot be; correlated inputs must all be normal, or all Student t of the same
 *   degrees of freedom (then a multivariate t: JCGM 102:2011, 5.3.2.4); or if a trial gives no finite number
 * Cost: trials × one plain evaluation of the measurement function; 8 bytes kept for each trial.
 */
export function monteCarlo<Input extends string, Output extends string>(
  measurement: Measurement<Input, Output>,
  output: Output,
  draws: RandomDraws,
  options: MonteCarloOptions = {},
): MonteCarloResult {
  const { coverage = 0.95, interval = 'symmetric', digits = 2 } = options;
  // JCGM 101:2008, 7.9.4 b: at least 100/(1 - p) trials in a block, and at least 10⁴.
  const { blockTrials = Math.max(Math.ceil(100 / (1 - coverage)), 10_000), mostTrials = 1_000_000 } = options;
  const draw = drawer(measurement, draws);
  const blocks: { mean: number; u: number; low: number; high: number }[] = [];
  let all = new Float64Array(0);
  for (;;) {
    const block = new Float64Array(blockTrials);
    for (let i = 0; i < blockTrials; i++) {
      const y = measurement.outputs(plainNumbers, draw())[output];
      if (!Number.isFinite(y)) throw new RangeError(`monteCarlo: a trial gave ${y} for ${output}`);
      block[i] = y;
    }
    const joined = new Float64Array(all.length + blockTrials);
    joined.set(all);
    joined.set(block, all.length);
    all = joined;
    blocks.push({ ...momentsOf(block), ...coverageInterval(block.sort(), coverage, interval) });
    const { mean, u } = momentsOf(all);
    const tolerance = numericalTolerance(u, digits);
    const settled =
      blocks.length > 1 &&
      (['mean', 'u', 'low', 'high'] as const).every(
        (of) => (2 * momentsOf(blocks.map((b) => b[of])).u) / Math.sqrt(blocks.length) < tolerance,
      );
    if (settled || all.length + blockTrials > mostTrials) {
      const ends = coverageInterval(all.sort(), coverage, interval);
      return { mean, u, ...ends, coverage, interval, trials: all.length, settled, tolerance };
    }
  }
}

/** Draws one set of inputs. The record is used again for the next draw. */
function drawer<Input extends string>(
  measurement: Pick<Measurement<Input, string>, 'inputs' | 'correlations'>,
  draws: RandomDraws,
): () => Readonly<Record<Input, number>> {
  const { inputs } = measurement;
  const { names, r } = inputCovariance(measurement);
  const drawn = Object.fromEntries(names.map((name) => [name, inputs[name].value])) as Record<Input, number>;
  const steps = correlatedGroups(r).map((group): (() => void) => {
    const members = group.map((i) => names[i]);
    if (members.length === 1) {
      const [name] = members;
      const { value, u, distribution = 'normal', dof = null, limitsRel } = inputs[name];
      return () => {
        drawn[name] = value + u * drawStandard(distribution, draws, dof, limitsRel);
      };
    }
    const dof = commonDof(members.map((name) => inputs[name]));
    const lower = factorOf(group.map((i) => group.map((j) => r[i][j])));
    return () => {
      const z = members.map(() => draws.gaussian());
      const widen = dof === null ? 1 : 1 / Math.sqrt(drawChiSquared(dof, draws) / dof);
      members.forEach((name, i) => {
        const { value, u } = inputs[name];
        drawn[name] = value + u * widen * lower[i].reduce((sum, l, k) => sum + l * z[k], 0);
      });
    };
  });
  return () => {
    for (const step of steps) step();
    return drawn;
  };
}

/** Degrees of freedom of correlated inputs that are Student t; null when they are normal. */
function commonDof(group: readonly Measurement<string, string>['inputs'][string][]): number | null {
  const normal = group.every((q) => (q.distribution ?? 'normal') === 'normal');
  if (normal) return null;
  const [{ dof = null }] = group;
  const alike = group.every((q) => q.distribution === 'studentT' && q.dof === dof);
  if (!alike || dof === null) {
    const which = group.map((q) => q.source).join(', ');
    throw new RangeError(
      `monteCarlo: ${which} are correlated, so they must all be normal or all Student t of the same degrees of freedom`,
    );
  }
  return dof;
}

/** Mean and standard deviation. */
function momentsOf(values: ArrayLike<number>): { mean: number; u: number } {
  const n = values.length;
  const shift = values[0];
  let sum = 0;
  for (let i = 0; i < n; i++) sum += values[i] - shift;
  const mean = sum / n;
  let squares = 0;
  for (let i = 0; i < n; i++) squares += (values[i] - shift - mean) ** 2;
  return { mean: shift + mean, u: Math.sqrt(squares / (n - 1)) };
}
