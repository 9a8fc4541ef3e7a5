/**
 * The folded tether's fall in energy form, written anew from its closed form for the tests: with s = 1 - cos θ the share of the
 * length fallen, time = ∫√cos θ dθ in units of √(L/g) (Calkin & March, Am. J. Phys. 57 (1989) 154; Hamel 1949).
 *
 * Counted back from extension, θ = π/2 - φ²: time to go = ∫ 2φ √sin φ² dφ, whose integrand is smooth, so that Simpson's rule is
 * good to 1e-13 and no infinite speed is met on the way.
 */
const intervals = 4000;
const last = Math.sqrt(Math.PI / 2);
const step = last / intervals;
const integrand = (phi: number) => 2 * phi * Math.sqrt(Math.sin(phi * phi));

const timeToGo = new Float64Array(intervals + 1);
for (let i = 0; i < intervals; i++) {
  const a = i * step;
  timeToGo[i + 1] =
    timeToGo[i] + (step / 6) * (integrand(a) + 4 * integrand(a + step / 2) + integrand(a + step));
}

/** From release to extension in units of √(L/g). */
export const extensionTimeReduced = timeToGo[intervals];

/** Share of the length that the tip has fallen at a time after release in units of √(L/g). */
export function shareFallen(time: number): number {
  const toGo = extensionTimeReduced - time;
  if (toGo >= extensionTimeReduced) return 0;
  if (toGo <= 0) return 1;
  let low = 0;
  let high = intervals;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (timeToGo[middle] <= toGo) low = middle;
    else high = middle;
  }
  // Within the interval: bisection on Simpson's rule from its left edge.
  const edge = low * step;
  let a = edge;
  let b = edge + step;
  for (let k = 0; k < 30; k++) {
    const middle = (a + b) / 2;
    const part =
      ((middle - edge) / 6) * (integrand(edge) + 4 * integrand((edge + middle) / 2) + integrand(middle));
    if (timeToGo[low] + part <= toGo) a = middle;
    else b = middle;
  }
  return 1 - Math.sin(a * a);
}
