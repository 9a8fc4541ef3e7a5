import type { Distribution } from './distribution.ts';

/**
 * One source of uncertainty in the unit of the result; without `dof` its size is taken as known exactly. What it is made of
 * (input, sensitivity) stands beside it where it came out of a measurement function.
 */
export interface Contribution {
  readonly source: string;
  /** Size of its contribution: |sensitivity| times the input's standard uncertainty. */
  readonly u: number;
  readonly dof?: number;
  readonly distribution?: Distribution;
  readonly inputValue?: number;
  readonly uInput?: number;
  readonly inputUnit?: string;
  /** Change of the result for a change of the input by one of its units. */
  readonly sensitivity?: number;
}

/** Correlation of the inputs behind two contributions of a budget, by their places in it. */
export interface ContributionCorrelation {
  readonly between: readonly [number, number];
  readonly r: number;
}

type Sized = Pick<Contribution, 'u' | 'sensitivity'>;

/**
 * Combined standard uncertainty: root sum of squares of uncorrelated contributions (JCGM 100:2008, 5.1.2), with the products of
 * correlated ones (5.2.2, equation 16).
 */
export function combined(
  contributions: readonly Sized[],
  correlations: readonly ContributionCorrelation[] = [],
): number {
  const independent = Math.hypot(...contributions.map((c) => c.u));
  if (correlations.length === 0) return independent;
  const products = correlations.reduce(
    (sum, { between: [a, b], r }) => sum + 2 * r * signed(contributions[a]) * signed(contributions[b]),
    0,
  );
  return Math.sqrt(Math.max(0, independent ** 2 + products));
}

function signed({ u, sensitivity = 1 }: Sized): number {
  return sensitivity < 0 ? -u : u;
}

/**
 * Effective degrees of freedom after Welch and Satterthwaite, not truncated; null when unlimited.
 * JCGM 100:2008, G.4.1, equation (G.2b). The equation is for independent contributions: those that are correlated count as one,
 * with the fewest degrees of freedom among them.
 */
export function effectiveDof(
  contributions: readonly Contribution[],
  correlations: readonly ContributionCorrelation[] = [],
): number | null {
  const u = combined(contributions, correlations);
  let sum = 0;
  for (const group of groupsOf(contributions.length, correlations)) {
    const dof = Math.min(...group.map((i) => contributions[i].dof ?? Number.POSITIVE_INFINITY));
    const within = correlations.flatMap(({ between: [a, b], r }) =>
      group.includes(a) ? [{ between: [group.indexOf(a), group.indexOf(b)] as const, r }] : [],
    );
    const size = combined(
      group.map((i) => contributions[i]),
      within,
    );
    if (Number.isFinite(dof)) sum += size ** 4 / dof;
  }
  return sum > 0 ? u ** 4 / sum : null;
}

function groupsOf(count: number, correlations: readonly ContributionCorrelation[]): number[][] {
  const groupOf = Array.from({ length: count }, (_, i) => i);
  for (const { between } of correlations) {
    const [from, to] = [groupOf[between[1]], groupOf[between[0]]];
    for (let i = 0; i < count; i++) if (groupOf[i] === from) groupOf[i] = to;
  }
  const groups = new Map<number, number[]>();
  groupOf.forEach((g, i) => {
    groups.set(g, [...(groups.get(g) ?? []), i]);
  });
  return [...groups.values()];
}
