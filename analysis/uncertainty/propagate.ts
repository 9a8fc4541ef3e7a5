import { dualNumbers } from './dual.ts';
import { type Contribution, type ContributionCorrelation, combined } from './effectiveDof.ts';
import { inputCovariance, type Measurement } from './measurement.ts';

/** One output of a measurement with what its inputs contribute. */
interface Propagated {
  readonly value: number;
  /** Combined standard uncertainty. */
  readonly u: number;
  /** One for each input, in the order of the inputs, then the second-order terms where they say anything. */
  readonly contributions: readonly Contribution[];
  readonly correlations: readonly ContributionCorrelation[];
  /** How far the mean of the output is from its value at the inputs' estimates, to second order; not applied. */
  readonly meanShift: number;
}

export interface Propagation<Output extends string> {
  readonly outputs: Readonly<Record<Output, Propagated>>;
  /** Covariance of two outputs that the same inputs make (JCGM 100:2008, H.2.3, equation H.9). */
  covariance(a: Output, b: Output): number;
  correlation(a: Output, b: Output): number;
}

/** Second-order terms smaller than this share of u would not change its second digit: they get no line in the budget. */
const visibleShare = 0.02;

/**
 * Law of propagation of uncertainty (JCGM 100:2008, 5.1.2 and 5.2.2) with sensitivities from automatic differentiation. Second
 * order: the variance of ½ xᵀHx, ½ tr(HVHV) for normal inputs (the leading term of 5.1.2, note, where a first derivative
 * vanishes, as that of a cosine at zero does).
 *
 * @throws RangeError if an input or a correlation cannot be, or an output is no finite number
 * Cost: one evaluation of the measurement function, each operation O(n²) for n inputs.
 */
export function propagate<Input extends string, Output extends string>(
  measurement: Measurement<Input, Output>,
): Propagation<Output> {
  const { inputs } = measurement;
  const { names, covariance, r } = inputCovariance(measurement);
  const n = names.length;
  const m = dualNumbers(n, true);
  const x = Object.fromEntries(names.map((name, i) => [name, m.input(inputs[name].value, i)])) as Record<
    Input,
    ReturnType<typeof m.input>
  >;
  const evaluated = measurement.outputs(m, x);
  const outputNames = Object.keys(evaluated) as Output[];

  const propagated = outputNames.map((output): [Output, Propagated] => {
    const { value, slope, curvature } = evaluated[output];
    if (!Number.isFinite(value)) throw new RangeError(`propagate: ${output} is ${value}`);
    const contributions = names.map((name, i): Contribution => {
      const { source, value: inputValue, u, unit, distribution, dof } = inputs[name];
      return {
        source,
        u: Math.abs(slope[i]) * u,
        ...(dof === undefined ? {} : { dof }),
        distribution: distribution ?? 'normal',
        inputValue,
        uInput: u,
        ...(unit === undefined ? {} : { inputUnit: unit }),
        sensitivity: slope[i],
      };
    });
    const correlations = correlationsOf(r, contributions);
    const first = combined(contributions, correlations);
    const second = curvature === null ? none : secondOrder(curvature, covariance);
    const visible = second.u > visibleShare * first;
    const all = visible ? [...contributions, { source: 'second-order terms', u: second.u }] : contributions;
    const u = combined(all, correlations);
    if (!Number.isFinite(u)) throw new RangeError(`propagate: the uncertainty of ${output} is ${u}`);
    return [output, { value, u, contributions: all, correlations, meanShift: second.meanShift }];
  });

  const covarianceOf = (a: Output, b: Output) => {
    let sum = 0;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) sum += evaluated[a].slope[i] * evaluated[b].slope[j] * covariance[i][j];
    }
    return sum;
  };
  return {
    outputs: Object.fromEntries(propagated) as Record<Output, Propagated>,
    covariance: covarianceOf,
    correlation: (a, b) => covarianceOf(a, b) / Math.sqrt(covarianceOf(a, a) * covarianceOf(b, b)),
  };
}

const none = { u: 0, meanShift: 0 };

function correlationsOf(
  r: readonly (readonly number[])[],
  contributions: readonly Contribution[],
): ContributionCorrelation[] {
  return r.flatMap((row, i) =>
    row.flatMap((coefficient, j) =>
      j > i && coefficient !== 0 && contributions[i].u > 0 && contributions[j].u > 0
        ? [{ between: [i, j] as const, r: coefficient }]
        : [],
    ),
  );
}

function secondOrder(curvature: Float64Array, covariance: readonly (readonly number[])[]): typeof none {
  const n = covariance.length;
  // HV, whose trace is the mean of xᵀHx and half of whose squared trace its variance
  const hv = covariance.map((_, i) =>
    covariance.map((__, j) => {
      let sum = 0;
      for (let k = 0; k < n; k++) if (covariance[k][j] !== 0) sum += curvature[i * n + k] * covariance[k][j];
      return sum;
    }),
  );
  let mean = 0;
  let squared = 0;
  for (let i = 0; i < n; i++) {
    mean += hv[i][i];
    for (let j = 0; j < n; j++) squared += hv[i][j] * hv[j][i];
  }
  return { u: Math.sqrt(Math.max(0, squared / 2)), meanShift: mean / 2 };
}
