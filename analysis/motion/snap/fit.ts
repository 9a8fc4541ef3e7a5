import { type Cells, cellsOn } from './cells.ts';
import { valuesAt, variancesAt } from './curves.ts';
import { type Data, type Density, densityOf, mostProbable, type Prior, posteriorOf } from './density.ts';
import { evenEdges, gradedEdges, gradedPlaces, logDensityFor } from './grading.ts';
import { informationOf, informationOfObservations } from './information.ts';
import { betweenKnots, evenPlaces, interpolated } from './knots.ts';
import { type Noise, noiseOf } from './noise.ts';
import { roughNoise } from './roughNoise.ts';
import type { Scaled } from './scaled.ts';

/** The smoother of a piece with everything that was chosen from the data. */
export interface SnapFit {
  readonly data: Data;
  readonly density: Density;
  /** Deviation of the log density's change from knot to knot that had the greatest evidence. */
  readonly change: number;
  readonly noise: Noise;
  readonly edf: number;
}

/** Deviations of the log density's change from one of the most knots to the next, among which evidence chooses. */
const changes = [0.1, 0.4, 1.6, 4];
/** Evidence by which a freer density must be ahead: chance alone prefers it now and then. */
const stepWorth = 2.5;
const mostKnots = 24;
/** Points to a knot at least. */
const pointsPerKnot = 4;
/** Positions without any noise would leave nothing to weigh. */
const leastNoise = 1e-6;
const mostRounds = 12;
/** Rounds end when the noise changes by less than this. */
const settled = 0.03;
/** Cells are laid anew for a changed density until their number changes by less than this share. */
const mostPasses = 5;
const sameCells = 0.1;
const firstFiner = 3;
const middleCorner = 12;
const firstCells = 128;
/** g, as an upper bound of how fast a body that starts from rest speeds up before anything is known of it [m/s²]. */
const firstAccelerationMps2 = 10;

/**
 * Chooses noise and density in turns: smooth, take variance and correlation of the noise from the residuals, smooth again, until the
 * noise stands still. How freely the density may change is chosen once, by evidence. Cells are laid anew as the density moves.
 */
export function snapFit(scaled: Scaled): SnapFit {
  const { time, u } = scaled;
  const n = time.length;
  const knots = Math.max(2, Math.min(mostKnots, Math.floor(n / pointsPerKnot)));
  const narrowest = scaled.step;
  const precision = u.reduce((sum, v) => sum + 1 / (v * v), 0);
  const joined = Uint8Array.from(time, (t, i) => (i > 0 && t - time[i - 1] < 1.5 * narrowest ? 1 : 0));

  let noise: Noise = { variance: Math.max(leastNoise, roughNoise(time, scaled.value, u)), correlation: 1 };
  let accelerationMps2 = firstAccelerationMps2;
  const perVariance = () => precision / (noise.variance * noise.correlation);
  let places = evenPlaces(knots);
  const dataOn = (edges: Float64Array): Data => {
    const cells = cellsOn(edges);
    const middles = Float64Array.from({ length: cells.count }, (_, j) => (edges[j] + edges[j + 1]) / 2);
    return {
      cells,
      places,
      between: betweenKnots(places, middles),
      positions: informationOf(cells, time, scaled.value, u),
      noise: noise.variance * noise.correlation,
      fixed: informationOfObservations(cells, scaled.rest(accelerationMps2)),
      startMps2: accelerationMps2,
    };
  };
  const priorWith = (change: number): Prior => ({
    knots,
    middle: logDensityFor(middleCorner, perVariance()),
    change: change / Math.sqrt((knots - 1) / (mostKnots - 1)),
  });
  const graded = (at: Float64Array) => dataOn(gradedEdges(places, at, perVariance(), narrowest));

  let at: Float64Array = new Float64Array(knots).fill(constantDensity(dataOn, perVariance(), n, knots));
  let change = changes[changes.length - 1];
  // From one density for all to one that varies cells must be fine enough for what is yet to be found.
  let data = graded(at.map((k) => k + 8 * Math.log(firstFiner)));
  let edf = 4;
  let white = true;
  for (let round = 0; round < mostRounds; round++) {
    for (let pass = 0; pass < mostPasses; pass++) {
      const cells = data.cells.count;
      at = mostProbable(data, priorWith(change), at).at;
      data = graded(at);
      if (Math.abs(Math.log(data.cells.count / cells)) < sameCells) break;
    }
    if (round === 1) {
      const tried = changes.map((c) => {
        const { at: own } = mostProbable(data, priorWith(c), at);
        return { c, density: densityOf(graded(own), priorWith(c), own) };
      });
      const best = tried.reduce((a, b) =>
        evidenceOf(b.density) > evidenceOf(a.density) + stepWorth ? b : a,
      );
      change = best.c;
      at = best.density?.knots ?? at;
      data = graded(at);
    }
    const now = posteriorOf(data, at);
    if (!now) throw new RangeError('snapFit: densities beyond double precision');
    const residual = valuesAt(data.cells, now.coefficients, time, 0).map(
      (v, i) => (scaled.value[i] - v) / u[i],
    );
    edf = effectiveParameters(data.cells, now.covariance, time, u, data.noise);
    const found = noiseOf(residual, joined, edf);
    // What the curve can explain counts as curve: correlation is looked for when white noise has come to rest.
    const next = white ? { variance: found.whiteVariance, correlation: 1 } : found;
    accelerationMps2 = startOf(scaled, data.cells, now.coefficients, now.covariance);
    const drift = Math.abs(Math.log((next.variance * next.correlation) / data.noise));
    noise = next;
    if (round === 0) {
      const moved = gradedPlaces(places, at, perVariance());
      at = interpolated(betweenKnots(places, moved), at);
      places = moved;
    }
    data = graded(at);
    if (round > 1 && drift < settled) {
      if (!white) break;
      white = false;
      if (found.correlation === 1) break;
      noise = found;
      data = graded(at);
    }
  }
  const density = densityOf(data, priorWith(change), at);
  if (!density) throw new RangeError('snapFit: densities beyond double precision');
  return { data, density, change, noise, edf };
}

function evidenceOf(density: Density | null): number {
  return density ? density.logEvidence : Number.NEGATIVE_INFINITY;
}

/** Trace of the matrix that makes smoothed positions from measured ones. */
function effectiveParameters(
  cells: Cells,
  covariance: Float64Array,
  time: Float64Array,
  u: Float64Array,
  noise: number,
): number {
  const variance = variancesAt(cells, covariance, time, 0);
  let sum = 0;
  for (let i = 0; i < time.length; i++) sum += variance[i] / (u[i] * u[i] * noise);
  return sum;
}

/** Size of the acceleration where the piece starts, with its uncertainty [m/s²]. */
function startOf(scaled: Scaled, cells: Cells, coefficients: Float64Array, covariance: Float64Array): number {
  const zero = Float64Array.of(0);
  const unit = scaled.unitM / scaled.spanS ** 2;
  const a = unit * valuesAt(cells, coefficients, zero, 2)[0] + scaled.cubic(0, 2);
  return Math.hypot(a, unit * Math.sqrt(variancesAt(cells, covariance, zero, 2)[0]));
}

/** Best density that is the same everywhere, on even cells that are made finer as long as the best one asks for it. */
function constantDensity(
  dataOn: (edges: Float64Array) => Data,
  pointsPerVariance: number,
  n: number,
  knots: number,
): number {
  for (let count = Math.min(n, firstCells); ; count *= 4) {
    const data = dataOn(evenEdges(Math.max(24, count)));
    const largest = Math.max(24, count) / 2;
    let best = Number.NEGATIVE_INFINITY;
    let bestCorner = largest;
    for (let corner = 3; corner <= largest; corner *= 1.3) {
      const value = logDensityFor(corner, pointsPerVariance);
      const found = posteriorOf(data, new Float64Array(knots).fill(value));
      if (found && found.logEvidence > best) {
        best = found.logEvidence;
        bestCorner = corner;
      }
    }
    if (bestCorner < largest / 1.4 || count >= n) return logDensityFor(bestCorner, pointsPerVariance);
  }
}
