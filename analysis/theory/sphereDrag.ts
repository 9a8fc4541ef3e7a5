/** Relative standard uncertainty of the curve where a falling ball lives: what the correlations in use differ by. */
export const uSphereDragRel = 0.1;

/**
 * Drag coefficient of a smooth sphere in steady motion: the standard drag curve.
 *
 * Clift, Grace & Weber, Bubbles, Drops and Particles (1978), table 5.12: piecewise, within 6 % of the data of many authors; the
 * correlations in use differ by up to 12 % about their mean between Re 1e4 and 1e5, so a user carries 10 %.
 *
 * @param reynolds  ρ v d / μ, from 0 to 3.38e5 (beyond, the boundary layer turns turbulent and the coefficient falls: NaN)
 */
export function sphereDrag(reynolds: number): number {
  if (reynolds <= 0) return 0;
  const w = Math.log10(reynolds);
  if (reynolds < 0.01) return 3 / 16 + 24 / reynolds;
  if (reynolds < 20) return (24 / reynolds) * (1 + 0.1315 * reynolds ** (0.82 - 0.05 * w));
  if (reynolds < 260) return (24 / reynolds) * (1 + 0.1935 * reynolds ** 0.6305);
  if (reynolds < 1500) return 10 ** (1.6435 - 1.1242 * w + 0.1558 * w * w);
  if (reynolds < 1.2e4) return 10 ** (-2.4571 + 2.5558 * w - 0.9295 * w * w + 0.1049 * w ** 3);
  if (reynolds < 4.4e4) return 10 ** (-1.9181 + 0.637 * w - 0.0636 * w * w);
  if (reynolds <= 3.38e5) return 10 ** (-4.339 + 1.5809 * w - 0.1546 * w * w);
  return Number.NaN;
}
