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
const mostLag = 40;
/** The smoother is not taken to have swallowed more than this share of the noise. */
const mostTaken = 0.3;
const turns = 6;

/**
 * Variance r'r / (n - edf) and 1 + 2 Σ ρ over the first significant autocorrelations (shared limits, section B). What the smoother
 * takes out of the residuals, edf/n of a white noise, is that much more where the noise is stronger at the low frequencies that it
 * passes: taken into account in turns.
 *
 * @param residual  over the stated u, in the order of time
 * @param joined    whether a residual comes one frame after the one before it
 */
export function noiseOf(
  residual: Float64Array,
  joined: Uint8Array,
  edf: number,
): Noise & { whiteVariance: number } {
  const n = residual.length;
  const squares = residual.reduce((sum, r) => sum + r * r, 0);
  const products = laggedProducts(
    residual,
    joined,
    Math.floor(Math.min(mostLag, (n - edf) / 8, n / (4 * edf))),
  );
  let correlation = 1;
  for (let turn = 0; turn < turns; turn++) {
    const taken = Math.min(mostTaken, (correlation * edf) / n);
    const scatter = squares / n / (1 - taken);
    let sum = 0;
    for (const [k, { mean, pairs }] of products.entries()) {
      const rho = mean / scatter + taken;
      if (!(rho > (k === 0 ? 2 : 1) / Math.sqrt(pairs))) break;
      sum += Math.min(1, rho);
    }
    correlation = Math.min(mostCorrelation, 1 + 2 * sum);
  }
  const varianceWith = (parameters: number) =>
    (statedCounts + squares) / (statedCounts + Math.max(n - parameters, n * (1 - mostTaken)));
  return { variance: varianceWith(correlation * edf), whiteVariance: varianceWith(edf), correlation };
}

/** Means of the products of residuals some frames apart, with the number of pairs, from one frame on while there are pairs. */
function laggedProducts(residual: Float64Array, joined: Uint8Array, lags: number) {
  const run = new Int32Array(residual.length);
  for (let i = 1; i < run.length; i++) run[i] = joined[i] ? run[i - 1] + 1 : 0;
  const products: { mean: number; pairs: number }[] = [];
  for (let lag = 1; lag <= lags; lag++) {
    let [sum, pairs] = [0, 0];
    for (let i = lag; i < run.length; i++) {
      if (run[i] < lag) continue;
      sum += residual[i] * residual[i - lag];
      pairs++;
    }
    if (pairs === 0) break;
    products.push({ mean: sum / pairs, pairs });
  }
  return products;
}
