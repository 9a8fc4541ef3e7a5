/**
 * By how much the scatter of residuals exceeds what was stated, as a factor on the standard uncertainty of smoothed values.
 *
 * Two parts: the residuals' variance against the stated one (only upwards: a stated uncertainty is not made smaller), and their
 * correlation from frame to frame, which smoothing does not average out: variance times (1 + ρ)/(1 - ρ) for the significant
 * lag-1 correlation ρ (shared limits, section B).
 *
 * @param standardised  residual / (u √(1 - leverage)), NaN where there is none
 */
export function inflation(standardised: Float64Array, from: number, to: number): number {
  let n = 0;
  let sum = 0;
  let lagged = 0;
  for (let i = from; i < to; i++) {
    if (!Number.isFinite(standardised[i])) continue;
    n++;
    sum += standardised[i] ** 2;
    if (i > from && Number.isFinite(standardised[i - 1])) lagged += standardised[i] * standardised[i - 1];
  }
  if (n < 8) return 1;
  const variance = sum / n;
  const rho = lagged / sum;
  const significant = rho > 2 / Math.sqrt(n) ? Math.min(rho, 0.9) : 0;
  return Math.sqrt(Math.max(1, variance) * ((1 + significant) / (1 - significant)));
}
