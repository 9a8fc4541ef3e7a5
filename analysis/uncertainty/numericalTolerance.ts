/**
 * Numerical tolerance of a standard uncertainty: half a unit in its last significant digit, u = c · 10^l with c of so many
 * digits (JCGM 101:2008, 7.9.2).
 *
 * @throws RangeError if u is not greater than 0
 */
export function numericalTolerance(u: number, digits: 1 | 2): number {
  if (!(u > 0 && Number.isFinite(u))) throw new RangeError(`numericalTolerance: standard uncertainty ${u}`);
  const exponent = Number(u.toExponential(digits - 1).split('e')[1]);
  return 0.5 * 10 ** (exponent - digits + 1);
}
