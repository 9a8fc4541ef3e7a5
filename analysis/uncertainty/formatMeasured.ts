const unitSigns: Readonly<Record<string, string>> = { 'm/s2': 'm/s²', 'm/s3': 'm/s³', '1': '' };

/** A unit as it is printed: `m/s2` of the contract is `m/s²`; the unit one has no sign. */
export function unitSign(unit: string): string {
  return unitSigns[unit] ?? unit;
}

/**
 * A value with an uncertainty as it is printed: the uncertainty with two significant digits, the value to the same place, a
 * space before the unit, a true minus sign: `(9.807 ± 0.012) m/s²`, `1.1981 ± 0.0012`.
 *
 * @param u  standard or expanded uncertainty: the caller says which beside it; 0: the value is printed with six digits, alone
 * JCGM 100:2008, 7.2.2 and 7.2.6; ISO 80000-1, 7.1.4.
 */
export function formatMeasured(value: number, u: number, unit: string): string {
  const sign = unitSign(unit);
  if (!(u > 0)) return withUnit(minus(String(Number(value.toPrecision(6)))), sign);
  const { text, places } = twoDigits(u);
  const pair = `${toPlaces(value, places)} ± ${text}`;
  return sign === '' ? pair : `(${pair}) ${sign}`;
}

/** Place of the second significant digit after rounding: 0.0996 rounds to 0.10, so its last place is 2. */
function twoDigits(u: number): { text: string; places: number } {
  const exponent = Number(u.toExponential(1).split('e')[1]);
  const places = 1 - exponent;
  return { text: toPlaces(u, places), places };
}

function toPlaces(value: number, places: number): string {
  if (places >= 0) return minus(unsignedZero(value.toFixed(Math.min(places, 100))));
  // Math.round takes halves up, toFixed away from zero: rounding the magnitude keeps a value and its negative alike.
  const step = 10 ** -places;
  const rounded = Math.sign(value) * Math.round(Math.abs(value) / step) * step;
  return minus(unsignedZero(rounded.toFixed(0)));
}

function unsignedZero(text: string): string {
  return Number(text) === 0 ? text.replace('-', '') : text;
}

function minus(text: string): string {
  return text.replaceAll('-', '\u2212');
}

function withUnit(text: string, sign: string): string {
  return sign === '' ? text : `${text} ${sign}`;
}
