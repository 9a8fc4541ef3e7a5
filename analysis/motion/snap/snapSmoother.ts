import type { Curve, Piece, Smoothed } from '../method.ts';
import { bandwidthAt } from './bandwidth.ts';
import { valuesAt, variancesAt } from './curves.ts';
import { posteriorOf } from './density.ts';
import { type SnapFit, snapFit } from './fit.ts';
import type { Posterior } from './posterior.ts';
import { type Scaled, scaledPiece } from './scaled.ts';

/** Share of the density's own uncertainty that goes into the curves': Laplace's approximation is too wide (shared limits, section B). */
const densityShare = 0.35;
/**
 * The variance given the data holds the noise through the weights and the bias of smoothing as the prior expects it. A curve with a
 * continuous fourth derivative is smoother than the prior's, and its bias less: for the acceleration, where expected bias is five
 * eighths of the variance (∫ω⁴/(1 + ω⁸)² over ∫ω⁴/(1 + ω⁸) is 3/8), intervals would hold 99 %. Nychka, J. Am. Stat. Assoc. 83 (1988)
 * 1134, on what such intervals hold. The share is a judgement: 0.6 held 98 % on the bench's motions, but only 68 of the 142 readings of
 * Pezzack et al. (1977) with noise, so it was raised until most were held.
 */
const biasShare = 0.8;
/** Step of the logarithm of the noise for a derivative. */
const noiseStep = 0.05;

/**
 * A piece by the Gaussian-process smoother of varying density: curves with the uncertainty from noise, its correlation, smoothing and
 * the choice of the density, and the bandwidth at each instant.
 *
 * @throws RangeError when the piece has fewer than four points or its times do not increase
 * Cost O(points) + some hundred times O(cells); cells grow with the curve's detail, not with the points.
 */
export function snapSmoother(piece: Piece): Smoothed {
  const scaled = scaledPiece(piece);
  const fit = snapFit(scaled);
  const at = instants(fit.data.cells.edges);
  const swings = swingsOf(fit);
  const noises = noisesOf(fit);
  const curves = [0, 1, 2, 3].map((derivative) => curveOf(scaled, fit, at, swings, noises, derivative));
  return {
    position: curves[0],
    velocity: curves[1],
    acceleration: curves[2],
    jerk: curves[3],
    bandwidthHz: between(at, bandwidthAt(scaled, fit, at, 0.5 / scaled.step), scaled.time).map(
      (f) => f / scaled.spanS,
    ),
    settings: {
      roughness: fit.change,
      noiseOverStated: Math.sqrt(fit.noise.variance),
      correlationFactor: fit.noise.correlation,
      cells: fit.data.cells.count,
      edf: fit.edf,
    },
  };
}

/** Edges and middles of the cells. */
function instants(edges: Float64Array): Float64Array {
  return Float64Array.from({ length: 2 * edges.length - 1 }, (_, k) =>
    k % 2 === 0 ? edges[k / 2] : (edges[(k - 1) / 2] + edges[(k + 1) / 2]) / 2,
  );
}

function curveOf(
  scaled: Scaled,
  { data, density }: SnapFit,
  at: Float64Array,
  swings: readonly (readonly [Posterior, Posterior])[],
  noises: readonly Posterior[],
  derivative: number,
): Curve {
  const { cells } = data;
  const { coefficients, covariance } = density.posterior;
  const unit = scaled.unitM / scaled.spanS ** derivative;
  const { time } = scaled;
  const value = valuesAt(cells, coefficients, time, derivative);
  const variance = variancesAt(cells, covariance, time, derivative);
  const atBest = variancesAt(cells, covariance, at, derivative);
  const [noisier, calmer] = noises.map((n) => variancesAt(cells, n.covariance, at, derivative));
  const held = atBest.map((v, k) => {
    const ofNoise = Math.min(1, Math.max(0, (noisier[k] - calmer[k]) / (2 * noiseStep * v)));
    return ofNoise + biasShare * (1 - ofNoise);
  });
  const more = new Float64Array(at.length);
  for (const ways of swings) {
    const [up, down] = ways.map((w) => valuesAt(cells, w.coefficients, at, derivative));
    const [upVariance, downVariance] = ways.map((w) => variancesAt(cells, w.covariance, at, derivative));
    for (let k = 0; k < at.length; k++) {
      more[k] += ((up[k] - down[k]) / 2) ** 2 + (upVariance[k] + downVariance[k]) / 2 - atBest[k];
    }
  }
  const extra = between(at, more, time);
  const share = between(at, held, time);
  return {
    value: value.map((v, i) => unit * v + scaled.cubic(time[i], derivative)),
    u: variance.map((v, i) => unit * Math.sqrt(share[i] * v + Math.max(0, extra[i]))),
  };
}

/** Values at increasing times from those at other ones, on straight lines. */
function between(at: Float64Array, values: Float64Array, time: Float64Array): Float64Array {
  let k = 0;
  return time.map((t) => {
    while (k < at.length - 2 && t >= at[k + 1]) k++;
    const share = Math.min(1, Math.max(0, (t - at[k]) / (at[k + 1] - at[k])));
    return values[k] + share * (values[k + 1] - values[k]);
  });
}

/** The curve with the density a share of its deviation up and down each of its principal directions. */
function swingsOf({ data, density }: SnapFit): (readonly [Posterior, Posterior])[] {
  return density.directions.flatMap((direction) => {
    const up = posteriorOf(
      data,
      density.knots.map((k, i) => k + densityShare * direction[i]),
    );
    const down = posteriorOf(
      data,
      density.knots.map((k, i) => k - densityShare * direction[i]),
    );
    return up && down ? [[up, down] as const] : [];
  });
}

/** The curve's covariance with the noise a little greater and a little less: its slope is the part that noise has in it. */
function noisesOf({ data, density }: SnapFit): Posterior[] {
  return [noiseStep, -noiseStep].flatMap(
    (step) => posteriorOf({ ...data, noise: data.noise * Math.exp(step) }, density.knots) ?? [],
  );
}
