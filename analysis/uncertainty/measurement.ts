import type { Arithmetic } from './arithmetic.ts';
import type { Distribution } from './distribution.ts';

/** One input quantity of a measurement: its estimate and what is believed of it. */
export interface InputQuantity {
  /** Where its uncertainty comes from, in the words of the budget. */
  readonly source: string;
  readonly value: number;
  /** Standard uncertainty in the unit of the value (a Student t: its scale, s/√n). */
  readonly u: number;
  readonly unit?: string;
  /** Normal where nothing else is stated. */
  readonly distribution?: Distribution;
  /** How well u is known; left out: exactly. */
  readonly dof?: number;
  /** Of a curvilinear trapezoid: how far its limits may be off, as a share of the half-width. */
  readonly limitsRel?: number;
}

/** Correlation coefficient of two inputs. */
interface InputCorrelation<Input extends string> {
  readonly between: readonly [Input, Input];
  readonly r: number;
}

/** A measurement: its inputs, and the function that makes its outputs of them. */
export interface Measurement<Input extends string, Output extends string> {
  readonly inputs: Readonly<Record<Input, InputQuantity>>;
  readonly correlations?: readonly InputCorrelation<Input>[];
  /** The measurement function, in whatever arithmetic: values, derivatives and draws all come from this one text. */
  outputs<T>(m: Arithmetic<T>, x: Readonly<Record<Input, T>>): Readonly<Record<Output, T>>;
}

/** Names of the inputs, in the order they were stated. */
function inputNames<Input extends string>(inputs: Readonly<Record<Input, InputQuantity>>): readonly Input[] {
  return Object.keys(inputs) as Input[];
}

/**
 * Covariance of the inputs, row by row, and their correlation.
 *
 * @throws RangeError if an estimate or an uncertainty is no number, or the correlations cannot be (outside ±1, or contradicting
 *   each other so that some combination would have a negative variance)
 */
export function inputCovariance<Input extends string>({
  inputs,
  correlations = [],
}: Pick<Measurement<Input, string>, 'inputs' | 'correlations'>): {
  readonly names: readonly Input[];
  readonly r: readonly (readonly number[])[];
  readonly covariance: readonly (readonly number[])[];
} {
  const names = inputNames(inputs);
  for (const name of names) {
    const { source, value, u, dof } = inputs[name];
    if (!Number.isFinite(value)) throw new RangeError(`measurement: ${source} is ${value}`);
    if (!(Number.isFinite(u) && u >= 0))
      throw new RangeError(`measurement: ${source}: standard uncertainty ${u}`);
    if (dof !== undefined && !(dof > 0))
      throw new RangeError(`measurement: ${source}: ${dof} degrees of freedom`);
  }
  const r = names.map((_, i) => names.map((__, j): number => (i === j ? 1 : 0)));
  for (const { between, r: coefficient } of correlations) {
    const [i, j] = between.map((name) => names.indexOf(name));
    if (i < 0 || j < 0 || i === j)
      throw new RangeError(`measurement: correlation of ${between.join(' and ')}`);
    if (!(Math.abs(coefficient) <= 1)) {
      throw new RangeError(
        `measurement: correlation ${coefficient} of ${between.join(' and ')} is not within ±1`,
      );
    }
    r[i][j] = coefficient;
    r[j][i] = coefficient;
  }
  if (correlations.length > 0) factorOf(r);
  const covariance = r.map((row, i) => row.map((c, j) => c * inputs[names[i]].u * inputs[names[j]].u));
  return { names, r, covariance };
}

/** What rounding may leave of a pivot that is zero. */
const roundingOfPivot = 1e-9;

/**
 * Lower factor L of a correlation matrix, L Lᵀ = R, also of one that is singular (inputs fully correlated).
 *
 * @throws RangeError if R is not positive semi-definite
 */
export function factorOf(r: readonly (readonly number[])[]): number[][] {
  const n = r.length;
  const lower = r.map(() => new Array<number>(n).fill(0));
  for (let j = 0; j < n; j++) {
    let pivot = r[j][j];
    for (let k = 0; k < j; k++) pivot -= lower[j][k] ** 2;
    if (pivot < -roundingOfPivot) throw new RangeError('measurement: the correlations contradict each other');
    const root = pivot > roundingOfPivot ? Math.sqrt(pivot) : 0;
    lower[j][j] = root;
    for (let i = j + 1; i < n; i++) {
      let rest = r[i][j];
      for (let k = 0; k < j; k++) rest -= lower[i][k] * lower[j][k];
      if (root === 0 && Math.abs(rest) > Math.sqrt(roundingOfPivot)) {
        throw new RangeError('measurement: the correlations contradict each other');
      }
      lower[i][j] = root === 0 ? 0 : rest / root;
    }
  }
  return lower;
}

/** Inputs in groups that are correlated among each other, by index; an input of its own is a group of one. */
export function correlatedGroups(r: readonly (readonly number[])[]): number[][] {
  const groups: number[][] = [];
  const seen = new Set<number>();
  for (let i = 0; i < r.length; i++) {
    if (seen.has(i)) continue;
    const group = [i];
    seen.add(i);
    for (const member of group) {
      for (let j = 0; j < r.length; j++) {
        if (r[member][j] === 0 || seen.has(j)) continue;
        seen.add(j);
        group.push(j);
      }
    }
    groups.push(group.sort((a, b) => a - b));
  }
  return groups;
}
