/** Minus sign, not hyphen; the unit's slash and exponent in SI style. */
function si(unit: string): string {
  return unit.replace('m/s2', 'm/s²');
}

/** Decimals that show an uncertainty with two significant digits (JCGM 100:2008, 7.2.6). */
function decimalsFor(u: number): number {
  const exponent = Math.floor(Math.log10(Number(u.toPrecision(2))));
  return Math.max(0, 1 - exponent);
}

/**
 * Value and standard uncertainty as printed: the uncertainty with two significant digits, the value to match, a space before
 * the unit (ISO 80000-1). An uncertainty of 100 or more is given to the unit.
 *
 * @returns for example `9.807 ± 0.012 m/s²`; what stands behind ± is what was passed as u
 */
export function formatMeasured(value: number, u: number, unit: string): string {
  const suffix = unit === '' || unit === '1' ? '' : ` ${si(unit)}`;
  if (!(u > 0) || !Number.isFinite(u)) return `${minus(String(value))}${suffix}`;
  const decimals = decimalsFor(u);
  return `${minus(value.toFixed(decimals))} ± ${u.toFixed(decimals)}${suffix}`;
}

function minus(text: string): string {
  return text.replace('-', '\u2212');
}
