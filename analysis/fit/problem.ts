/** Bounds of a parameter, both included; infinite where there is none. */
export type Bounds = readonly [least: number, most: number];

/** Standardised residuals at some parameters, and how they change: one column for each parameter. */
export interface Linearised {
  /** (model - measured)/u: each of variance 1 where the model is right. */
  readonly residuals: Float64Array;
  readonly jacobian: readonly Float64Array[];
}

/**
 * A least-squares problem in its general form: whatever gives standardised residuals can be fitted, be they metres, pixels or
 * prior knowledge.
 */
export interface Problem {
  readonly start: Float64Array;
  readonly bounds: readonly Bounds[];
  /** Only the residuals: called for each trial step. A residual that is not finite makes the step be refused. */
  residuals(parameters: Float64Array): Float64Array;
  /** With their derivatives: called once for each step taken. */
  linearised(parameters: Float64Array): Linearised;
}

/** Bounds that bound nothing, for n parameters. */
export function unbounded(n: number): Bounds[] {
  return Array.from({ length: n }, () => [Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY] as const);
}
