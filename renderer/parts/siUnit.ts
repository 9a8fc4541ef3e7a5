/** A unit of the result as it is printed. */
export function siUnit(unit: string): string {
  return unit === '1' ? '' : unit.replace('m/s2', 'm/s²');
}
