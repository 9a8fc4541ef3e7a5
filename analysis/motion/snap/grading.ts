import { betweenKnots, evenSteps, interpolated, type Places } from './knots.ts';

/** Width of a cell in units of the time over which the smoother averages, 1/ω_c: narrower changes nothing. */
const cellInAverages = 0.4;
const fewestCells = 24;
/** Steps in which the density is followed. */
const steps = 600;
/** Share of the knots that lie as dense as the curve has detail; the rest are even in time. */
const followDetail = 0.5;

/** Angular frequency ω_c at which a smoother of snap density q under noise of so many points per unit time passes half. */
export function cornerOf(logDensity: number, pointsPerVariance: number): number {
  return Math.exp((logDensity + Math.log(pointsPerVariance)) / 8);
}

export function logDensityFor(corner: number, pointsPerVariance: number): number {
  return 8 * Math.log(corner) - Math.log(pointsPerVariance);
}

export function evenEdges(count: number): Float64Array {
  return Float64Array.from({ length: count + 1 }, (_, k) => k / count);
}

/** Edges of cells as wide as the density allows, never narrower than `narrowest`. */
export function gradedEdges(
  places: Places,
  knots: Float64Array,
  pointsPerVariance: number,
  narrowest: number,
): Float64Array {
  const run = running(places, knots, pointsPerVariance, (corner) =>
    Math.min(1 / narrowest, Math.max(fewestCells, corner / cellInAverages)),
  );
  return evenSteps(evenEdges(steps), run, Math.ceil(run[steps]));
}

/** Places for knots: half of them even in time, half where the curve has detail. */
export function gradedPlaces(places: Places, knots: Float64Array, pointsPerVariance: number): Places {
  const whole = running(places, knots, pointsPerVariance, (corner) => corner)[steps];
  const run = running(
    places,
    knots,
    pointsPerVariance,
    (corner) => 1 - followDetail + (followDetail * corner) / whole,
  );
  return evenSteps(evenEdges(steps), run, knots.length - 1);
}

/** Running integral of a function of the corner frequency over 0 … 1. */
function running(
  places: Places,
  knots: Float64Array,
  pointsPerVariance: number,
  of: (corner: number) => number,
): Float64Array {
  const middles = Float64Array.from({ length: steps }, (_, k) => (k + 0.5) / steps);
  const run = new Float64Array(steps + 1);
  interpolated(betweenKnots(places, middles), knots).forEach((value, k) => {
    run[k + 1] = run[k] + of(cornerOf(value, pointsPerVariance)) / steps;
  });
  return run;
}
