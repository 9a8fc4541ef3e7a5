/** What the residuals say of the noise. */
export interface Noise {
  /** Variance over the stated one. */
  readonly variance: number;
  /** Factor on the variance for what hangs together from frame to frame and does not average out. */
  readonly correlation: number;
}

/** The stated uncertainty counts as much as so many residuals: it holds where there are few. */
const statedCounts = 4;
const mostCorrelation = 12;

/**
 * Variance r'r / (n - edf) and 1 + 2 Σ ρ over the first significant autocorrelations (shared limits, section B). Residuals of a
 * smoother with white noise are correlated by -edf/n among near neighbours; that is taken off.
 *
 * @param residual  over the stated u, in the order of time
 * @param joined    whether a residual comes one frame after the one before it
 */
export function noiseOf(residual: Float64Array, joined: Uint8Array, edf: number): Noise {
  const n = residual.length;
  let squares = 0;
  for (let i = 0; i < n; i++) squares += residual[i] * residual[i];
  const free = Math.max(0, n - edf);
  const variance = (statedCounts + squares) / (statedCounts + free);
  const scatter = squares / Math.max(1, free);
  const share = edf / n;
  let correlation = 1;
  const mostLag = Math.floor(Math.min(40, free / 8, n / (2 * edf)));
  const run = new Int32Array(n);
  for (let i = 1; i < n; i++) run[i] = joined[i] ? run[i - 1] + 1 : 0;
  for (let lag = 1; lag <= mostLag && scatter > 0; lag++) {
    let sum = 0;
    let pairs = 0;
    for (let i = lag; i < n; i++) {
      if (run[i] < lag) continue;
      sum += residual[i] * residual[i - lag];
      pairs++;
    }
    const rho = sum / Math.max(1, pairs) / scatter + share;
    if (!(rho > 2 / Math.sqrt(pairs))) break;
    correlation += 2 * Math.min(1, rho);
  }
  return { variance, correlation: Math.min(mostCorrelation, correlation) };
}
