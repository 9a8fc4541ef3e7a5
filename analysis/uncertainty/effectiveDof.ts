/** One source of uncertainty in the unit of the result; without `dof` its size is taken as known exactly. */
export interface Contribution {
  readonly source: string;
  readonly u: number;
  readonly dof?: number;
}

/** Root sum of squares of uncorrelated contributions (JCGM 100:2008, 5.1.2). */
export function combined(contributions: readonly Pick<Contribution, 'u'>[]): number {
  return Math.hypot(...contributions.map((c) => c.u));
}

/**
 * Effective degrees of freedom after Welch and Satterthwaite, not truncated; null when unlimited.
 * JCGM 100:2008, G.4.1, equation (G.2b).
 */
export function effectiveDof(contributions: readonly Contribution[]): number | null {
  const u = combined(contributions);
  let sum = 0;
  for (const c of contributions) if (c.dof !== undefined) sum += c.u ** 4 / c.dof;
  return sum > 0 ? u ** 4 / sum : null;
}
