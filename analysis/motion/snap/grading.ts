import { interpolated } from './density.ts';

/** Width of a cell in units of the time over which the smoother averages, 1/ω_c: narrower changes nothing. */
const cellInAverages = 0.4;
const fewestCells = 24;

/** Even edges from `first` to 1. */
export function evenEdges(first: number, count: number): Float64Array {
  return Float64Array.from({ length: count + 1 }, (_, k) =>
    k === count ? 1 : first + ((1 - first) * k) / count,
  );
}

/** Angular frequency ω_c at which a smoother of snap density q under noise of so many points per unit time passes half. */
export function cornerOf(logDensity: number, pointsPerVariance: number): number {
  return Math.exp((logDensity + Math.log(pointsPerVariance)) / 8);
}

export function logDensityFor(corner: number, pointsPerVariance: number): number {
  return 8 * Math.log(corner) - Math.log(pointsPerVariance);
}

/** Edges of cells as wide as the density allows, never narrower than `narrowest`. */
export function gradedEdges(
  first: number,
  knots: Float64Array,
  pointsPerVariance: number,
  narrowest: number,
): Float64Array {
  const steps = 20 * knots.length + 60;
  const run = new Float64Array(steps + 1);
  const span = 1 - first;
  for (let k = 0; k < steps; k++) {
    const corner = cornerOf(interpolated(knots, first + (span * (k + 0.5)) / steps), pointsPerVariance);
    const perUnit = Math.min(1 / narrowest, Math.max(fewestCells / span, corner / cellInAverages));
    run[k + 1] = run[k] + (perUnit * span) / steps;
  }
  const count = Math.ceil(run[steps]);
  const edges = new Float64Array(count + 1);
  let k = 0;
  for (let e = 0; e <= count; e++) {
    const wanted = (run[steps] * e) / count;
    while (k < steps - 1 && run[k + 1] < wanted) k++;
    const share = Math.min(1, (wanted - run[k]) / (run[k + 1] - run[k]));
    edges[e] = first + (span * (k + share)) / steps;
  }
  edges[0] = first;
  edges[count] = 1;
  return edges;
}
