import type { KeyValue } from '../sheet/result.ts';
import { type Contribution, combined, effectiveDof } from './effectiveDof.ts';
import { studentT } from './studentT.ts';

/** Beyond this a coverage factor differs from the normal one by less than 0.02 %. */
const unlimitedDof = 5000;
/** Of u⁴/Σ(u⁴/ν): it must not take a single source's 18 degrees of freedom for 17. */
const rounding = 1e-12;

/**
 * A measured value with its budget: combined standard uncertainty (root sum of squares), effective degrees of freedom
 * (truncated to a whole number as JCGM 100:2008, G.4.2 asks; null when unlimited) and expanded uncertainty at 95 %.
 *
 * @param contributions  independent sources, each with its standard uncertainty in the unit of the value
 * @throws RangeError if the value or an uncertainty is not finite, or an uncertainty is negative
 */
export function measured(
  quantity: string,
  value: number,
  unit: string,
  contributions: readonly Contribution[],
  extras: { readonly bandwidthHz?: number; readonly definition?: string } = {},
): KeyValue {
  if (!Number.isFinite(value)) throw new RangeError(`measured: ${quantity} is ${value}`);
  for (const c of contributions) {
    if (!(Number.isFinite(c.u) && c.u >= 0)) {
      throw new RangeError(`measured: ${quantity}, ${c.source}: standard uncertainty ${c.u}`);
    }
  }
  const u = combined(contributions);
  const nu = effectiveDof(contributions);
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
    ...(extras.bandwidthHz === undefined ? {} : { bandwidthHz: extras.bandwidthHz }),
    ...(extras.definition === undefined ? {} : { definition: extras.definition }),
    budget: contributions.filter((c) => c.u > 0).map((c) => ({ source: c.source, u: c.u })),
  };
}
