import { longestGap, type Sighting } from './sighting.ts';

/** Sightings on either side of a gap that the bridge rests on. */
const abutment = 6;

/**
 * Fills short gaps between two sightings: state `bridged`, the place from a cubic through the sightings on both sides. A bridge
 * shows where the body must have been; it is never used as data.
 *
 * @param sightings  in ascending frame order
 */
export function bridgeGaps(sightings: readonly Sighting[]): Sighting[] {
  const bridged = [...sightings];
  const seen = (s: Sighting) => s.state === 'measured' || s.state === 'manual';
  for (let i = 0; i < sightings.length; i++) {
    if (seen(sightings[i])) continue;
    let end = i;
    while (end < sightings.length && !seen(sightings[end])) end++;
    const before = sightings
      .slice(Math.max(0, i - longestGap), i)
      .filter(seen)
      .slice(-abutment);
    const after = sightings
      .slice(end, end + longestGap)
      .filter(seen)
      .slice(0, abutment);
    if (before.length >= 2 && after.length >= 2 && end - i <= longestGap) {
      const piers = [...before, ...after];
      const fitX = cubicFit(piers.map((s) => [s.n, s.xPx, s.uXPx]));
      const fitY = cubicFit(piers.map((s) => [s.n, s.yPx, s.uYPx]));
      for (let k = i; k < end; k++) {
        const { n } = sightings[k];
        const x = fitX(n);
        const y = fitY(n);
        bridged[k] = {
          n,
          state: 'bridged',
          xPx: x.value,
          yPx: y.value,
          uXPx: x.u,
          uYPx: y.u,
          score: sightings[k].score,
        };
      }
    }
    i = end;
  }
  return bridged;
}

/** Least-squares cubic through (n, value, u); its standard error includes the scatter of the piers about the cubic. */
function cubicFit(
  piers: readonly (readonly [number, number, number])[],
): (n: number) => { value: number; u: number } {
  const terms = Math.min(4, piers.length);
  const middle = piers.reduce((s, p) => s + p[0], 0) / piers.length;
  const span = Math.max(...piers.map((p) => Math.abs(p[0] - middle)), 1);
  const powers = (n: number) => Array.from({ length: terms }, (_, k) => ((n - middle) / span) ** k);
  const rows = piers.map((p) => powers(p[0]));
  // Orthonormalise the columns (Gram-Schmidt): the coefficients then are plain sums, their variances one.
  const basis: { onRows: number[]; at: (n: number) => number }[] = [];
  for (let k = 0; k < terms; k++) {
    let onRows = rows.map((r) => r[k]);
    let at = (n: number) => powers(n)[k];
    for (const b of basis) {
      const share = onRows.reduce((s, v, i) => s + v * b.onRows[i], 0);
      const previous = at;
      onRows = onRows.map((v, i) => v - share * b.onRows[i]);
      at = (n) => previous(n) - share * b.at(n);
    }
    const norm = Math.sqrt(onRows.reduce((s, v) => s + v * v, 0));
    const unscaled = at;
    basis.push({ onRows: onRows.map((v) => v / norm), at: (n) => unscaled(n) / norm });
  }
  const coefficients = basis.map((b) => piers.reduce((s, p, i) => s + p[1] * b.onRows[i], 0));
  const value = (n: number) => coefficients.reduce((s, c, k) => s + c * basis[k].at(n), 0);
  const scatter =
    piers.reduce((s, p) => s + (p[1] - value(p[0])) ** 2, 0) / Math.max(1, piers.length - terms);
  const stated = piers.reduce((s, p) => s + p[2] ** 2, 0) / piers.length;
  const variance = Math.max(scatter, stated);
  return (n) => ({
    value: value(n),
    u: Math.sqrt(variance * (1 + basis.reduce((s, b) => s + b.at(n) ** 2, 0))),
  });
}
