import type { KeyValue } from '../sheet/result.ts';
import { type Contribution, type ContributionCorrelation, combined, effectiveDof } from './effectiveDof.ts';
import type { Measurement } from './measurement.ts';
import { propagate } from './propagate.ts';
import { studentT } from './studentT.ts';

/** Beyond this a coverage factor differs from the normal one by less than 0.02 %. */
const unlimitedDof = 5000;
/** Of u⁴/Σ(u⁴/ν): it must not take a single source's 18 degrees of freedom for 17. */
const rounding = 1e-12;

/** What a key value says beside its figures. */
export interface KeyValueExtras {
  readonly bandwidthHz?: number;
  readonly atLeast?: true;
  readonly framesInHalfWidth?: number;
  readonly definition?: string;
}

/**
 * A measured value with its budget: combined standard uncertainty, effective degrees of freedom (truncated to a whole number as
 * JCGM 100:2008, G.4.2 asks; null when unlimited) and expanded uncertainty at 95 %.
 *
 * @param contributions  sources, each with its standard uncertainty in the unit of the value
 * @param correlations   of the contributions, by their places
 * @throws RangeError if the value or an uncertainty is not finite, or an uncertainty is negative
 */
export function measured(
  quantity: string,
  value: number,
  unit: string,
  contributions: readonly Contribution[],
  extras: KeyValueExtras = {},
  correlations: readonly ContributionCorrelation[] = [],
): KeyValue {
  if (!Number.isFinite(value)) throw new RangeError(`measured: ${quantity} is ${value}`);
  for (const c of contributions) {
    if (!(Number.isFinite(c.u) && c.u >= 0)) {
      throw new RangeError(`measured: ${quantity}, ${c.source}: standard uncertainty ${c.u}`);
    }
  }
  const u = combined(contributions, correlations);
  const nu = effectiveDof(contributions, correlations);
  const dof = nu === null || nu > unlimitedDof ? null : Math.max(1, Math.floor(nu * (1 + rounding)));
  const k = studentT(dof);
  return {
    quantity,
    value,
    u,
    unit,
    dof,
    U95: k * u,
    k,
    ...extras,
    budget: contributions.filter((c) => c.u > 0).map((c) => ({ ...c })),
    ...(correlations.length === 0
      ? {}
      : {
          correlations: correlations.map(({ between: [a, b], r }) => ({
            between: [contributions[a].source, contributions[b].source],
            r,
          })),
        }),
  };
}

/**
 * A key value whose budget comes out of its measurement function.
 *
 * @param output  the one of the measurement's outputs that is the key value
 * @throws RangeError as `propagate` does
 */
export function measuredBy<Input extends string, Output extends string>(
  measurement: Measurement<Input, Output>,
  output: Output,
  quantity: string,
  unit: string,
  extras: KeyValueExtras = {},
): KeyValue {
  const { value, contributions, correlations } = propagate(measurement).outputs[output];
  return measured(quantity, value, unit, contributions, extras, correlations);
}
