import type { Sheet } from './sheet.ts';

/** Paths of the standard uncertainties that are stated as 0, as `scale.bars[0].uLengthM`. */
export function zeroUncertainties(part: Sheet | object, at = ''): string[] {
  return Object.entries(part).flatMap(([name, value]): string[] => {
    const inList = Array.isArray(part);
    const path = inList ? `${at}[${name}]` : at === '' ? name : `${at}.${name}`;
    if (value === 0 && !inList && /^u[A-Z]/.test(name)) return [path];
    return typeof value === 'object' && value !== null ? zeroUncertainties(value, path) : [];
  });
}
