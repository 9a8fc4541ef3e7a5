import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';

const minus = '\u2212';

describe('formatMeasured', () => {
  it.each([
    [9.80712, 0.0123, 'm/s2', '(9.807 ± 0.012) m/s²'],
    [1.198143, 0.00123, '1', '1.1981 ± 0.0012'],
    [0.5, 0.0996, 's', '(0.50 ± 0.10) s'],
    [-0.0123, 0.0051, 'm', `(${minus}0.0123 ± 0.0051) m`],
    [12345, 230, 'm', '(12350 ± 230) m'],
    [-12345, 230, 'm', `(${minus}12350 ± 230) m`],
    [1234, 996, 'm/s2', '(1200 ± 1000) m/s²'],
    [-0.0001, 0.12, 'm', '(0.00 ± 0.12) m'],
    [-4, 230, 'm', '(0 ± 230) m'],
    [9.80665, 0, 'm/s2', '9.80665 m/s²'],
    [-2.5, 0, '1', `${minus}2.5`],
    [-1.5e-7, 0, 'm', `${minus}1.5e${minus}7 m`],
  ])('%f with %f %s is printed %s', (value, u, unit, text) => {
    expect(formatMeasured(value, u, unit)).toBe(text);
  });

  const sized = fc
    .tuple(fc.double({ min: 1, max: 9.9999, noNaN: true }), fc.integer({ min: -9, max: 5 }))
    .map(([mantissa, exponent]) => mantissa * 10 ** exponent);
  const value = fc.double({ min: -1e7, max: 1e7, noNaN: true });
  const numberOf = (text: string) => Number(text.replaceAll(minus, '-'));

  it('gives the uncertainty two significant digits and the value the same last place', () => {
    fc.assert(
      fc.property(value, sized, (v, u) => {
        const [left, right] = formatMeasured(v, u, '1').split(' ± ');
        // Two significant digits: rounding moves u by at most half of the second, which is at most 5 %.
        expect(Math.abs(numberOf(right) / u - 1)).toBeLessThanOrEqual(0.0501);
        const placesOf = (text: string) => text.split('.')[1]?.length ?? 0;
        expect(placesOf(left)).toBe(placesOf(right));
        const digits = right.replace('.', '').replace(/^0+/, '');
        expect(digits).toMatch(placesOf(right) > 0 ? /^\d{2}$/ : /^\d{2}0*$/);
        // The value is off by at most half a unit of the last place shown, at most a twentieth of u (1e-9: doubles at 1e7).
        expect(Math.abs(numberOf(left) - v)).toBeLessThanOrEqual(0.0501 * u + 1e-9);
      }),
    );
  });

  it('prints a value and its negative alike but for the sign', () => {
    fc.assert(
      fc.property(value, sized, (v, u) => {
        const bare = (text: string) => text.replaceAll(minus, '');
        expect(bare(formatMeasured(-v, u, 'm'))).toBe(bare(formatMeasured(v, u, 'm')));
      }),
    );
  });
});
