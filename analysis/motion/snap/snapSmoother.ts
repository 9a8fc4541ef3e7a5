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
  const curves = [0, 1, 2, 3].map((derivative) => curveOf(scaled, fit, at, swings, derivative));
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
  derivative: number,
): Curve {
  const { cells } = data;
  const { coefficients, covariance } = density.posterior;
  const unit = scaled.unitM / scaled.spanS ** derivative;
  const { time } = scaled;
  const value = valuesAt(cells, coefficients, time, derivative);
  const variance = variancesAt(cells, covariance, time, derivative);
  const atBest = variancesAt(cells, covariance, at, derivative);
  const more = new Float64Array(at.length);
  for (const ways of swings) {
    const [up, down] = ways.map((w) => valuesAt(cells, w.coefficients, at, derivative));
    const [upVariance, downVariance] = ways.map((w) => variancesAt(cells, w.covariance, at, derivative));
    for (let k = 0; k < at.length; k++) {
      more[k] += ((up[k] - down[k]) / 2) ** 2 + (upVariance[k] + downVariance[k]) / 2 - atBest[k];
    }
  }
  const extra = between(at, more, time);
  return {
    value: value.map((v, i) => unit * v + scaled.cubic(time[i], derivative)),
    u: variance.map((v, i) => unit * Math.sqrt(Math.max(v, v + extra[i]))),
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
