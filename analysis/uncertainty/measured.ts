import type { KeyValue } from '../sheet/result.ts';
import { studentT } from './studentT.ts';

/** One contribution to a value's uncertainty. */
export interface Contribution {
  readonly source: string;
  /** Standard uncertainty it gives to the value, in the value's unit; its sign does not matter. */
  readonly u: number;
  /** Degrees of freedom; left out: unlimited (type B). */
  readonly dof?: number;
}

/** Effective degrees of freedom by Welch and Satterthwaite (JCGM 100:2008, G.4.1, eq. G.2b). */
export function effectiveDof(contributions: readonly Contribution[]): number {
  const u2 = contributions.reduce((s, c) => s + c.u * c.u, 0);
  const sum = contributions.reduce((s, c) => s + (c.dof === undefined ? 0 : c.u ** 4 / c.dof), 0);
  return sum === 0 ? Number.POSITIVE_INFINITY : (u2 * u2) / sum;
}

/**
 * A value with its budget: independent contributions combined as the root of their squares (JCGM 100:2008, 5.1.2), expanded
 * for 95 % by Student's t with the effective degrees of freedom truncated to a whole number (G.4.1).
 */
export function measured(
  quantity: string,
  value: number,
  unit: string,
  contributions: readonly Contribution[],
  extras: { readonly bandwidthHz?: number; readonly definition?: string } = {},
): KeyValue {
  const u = Math.sqrt(contributions.reduce((s, c) => s + c.u * c.u, 0));
  const dof = effectiveDof(contributions);
  const k = studentT(Number.isFinite(dof) ? Math.max(1, Math.floor(dof)) : dof, 0.95);
  return {
    quantity,
    value,
    u,
    unit,
    dof: Number.isFinite(dof) ? dof : null,
    U95: k * u,
    k,
    ...extras,
    budget: contributions.map((c) => ({ source: c.source, u: Math.abs(c.u) })).filter((c) => c.u > 0),
  };
}
