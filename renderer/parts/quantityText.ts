/** What may be typed behind a number, by the SI unit that the field is stated in: a factor to that unit. */
const units = {
  'm/s': { 'm/s': 1 },
  m: { m: 1, mm: 1e-3, cm: 1e-2, km: 1e3, µm: 1e-6, um: 1e-6 },
  s: { s: 1, ms: 1e-3, µs: 1e-6, us: 1e-6, ns: 1e-9 },
  Hz: { Hz: 1, kHz: 1e3, MHz: 1e6, '1/s': 1, '/s': 1 },
  kg: { kg: 1, g: 1e-3, mg: 1e-6 },
  Pa: { Pa: 1, hPa: 1e2, kPa: 1e3, mbar: 1e2 },
  'm/s²': { 'm/s²': 1, 'm/s2': 1 },
  'm/s³': { 'm/s³': 1, 'm/s3': 1 },
  '°': { '°': 1, deg: 1 },
  '°C': { '°C': 1, C: 1 },
  px: { px: 1 },
  '1': { '%': 1e-2, ppm: 1e-6 },
  '': {},
} as const satisfies Record<string, Record<string, number>>;

export type FieldUnit = keyof typeof units;

/**
 * Reads what was typed into a number field: a number, with or without one of the units that belong to the field's.
 *
 * @returns the value in the field's own unit, or the line that says what is wrong
 */
export function readQuantity(
  text: string,
  unit: FieldUnit,
): { readonly value: number } | { readonly problem: string } {
  const typed = text.trim().replace('\u2212', '-').replace('μ', 'µ');
  if (typed.includes(','))
    return { problem: `"${typed}" has a comma; write decimals with a point and no marks between thousands` };
  const [, number, suffix = ''] = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)\s*(.*)$/i.exec(typed) ?? [];
  if (number === undefined) return { problem: `"${typed}" is not a number` };
  const known: Readonly<Record<string, number>> = units[unit];
  const factor = suffix === '' ? 1 : known[suffix];
  if (factor === undefined) {
    const names = Object.keys(known);
    return {
      problem: `"${suffix}" is not a unit of this field${names.length > 0 ? `; it takes ${names.join(', ')}` : ''}`,
    };
  }
  // 15 digits: so that 450 mm is 0.45 m and not its neighbour
  return { value: factor === 1 ? Number(number) : Number((Number(number) * factor).toPrecision(15)) };
}

/** A value as it stands in its field. */
export function fieldText(value: number | undefined): string {
  return value === undefined ? '' : String(value);
}
