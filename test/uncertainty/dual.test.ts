import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type Arithmetic, plainNumbers } from '../../analysis/uncertainty/arithmetic.ts';
import { dualNumbers } from '../../analysis/uncertainty/dual.ts';
import { leastSquares, solveLinear } from '../../analysis/uncertainty/linearSystem.ts';

type TwoInputs = <T>(m: Arithmetic<T>, a: T, b: T) => T;

/** Each operation with its derivatives by a, b, aa, ab, bb, from a table of derivatives. */
const table: readonly [string, TwoInputs, (a: number, b: number) => number[]][] = [
  ['add', (m, a, b) => m.add(a, 2, b, b), () => [1, 2, 0, 0, 0]],
  ['subtract', (m, a, b) => m.subtract(a, b), () => [1, -1, 0, 0, 0]],
  ['subtract from a plain number', (m, a) => m.subtract(3, a), () => [-1, 0, 0, 0, 0]],
  ['subtract a plain number', (m, a) => m.subtract(a, 3), () => [1, 0, 0, 0, 0]],
  ['multiply', (m, a, b) => m.multiply(a, 3, b), (a, b) => [3 * b, 3 * a, 0, 3, 0]],
  ['divide', (m, a, b) => m.divide(a, b), (a, b) => [1 / b, -a / b ** 2, 0, -1 / b ** 2, (2 * a) / b ** 3]],
  ['divide a plain number', (m, a) => m.divide(2, a), (a) => [-2 / a ** 2, 0, 4 / a ** 3, 0, 0]],
  ['divide by a plain number', (m, a) => m.divide(a, 4), () => [0.25, 0, 0, 0, 0]],
  ['power', (m, a) => m.power(a, 2.5), (a) => [2.5 * a ** 1.5, 0, 3.75 * a ** 0.5, 0, 0]],
  ['power 1', (m, a) => m.power(a, 1), () => [1, 0, 0, 0, 0]],
  ['power 0', (m, a) => m.power(a, 0), () => [0, 0, 0, 0, 0]],
  ['sqrt', (m, a) => m.sqrt(a), (a) => [0.5 / Math.sqrt(a), 0, -0.25 * a ** -1.5, 0, 0]],
  ['exp', (m, a) => m.exp(a), (a) => [Math.exp(a), 0, Math.exp(a), 0, 0]],
  ['log', (m, a) => m.log(a), (a) => [1 / a, 0, -1 / a ** 2, 0, 0]],
  ['sin', (m, a) => m.sin(a), (a) => [Math.cos(a), 0, -Math.sin(a), 0, 0]],
  ['cos', (m, a) => m.cos(a), (a) => [-Math.sin(a), 0, -Math.cos(a), 0, 0]],
  ['abs of a negative', (m, a) => m.abs(m.multiply(-1, a)), () => [1, 0, 0, 0, 0]],
  [
    'atan2',
    (m, a, b) => m.atan2(a, b),
    (a, b) => {
      const r2 = a * a + b * b;
      return [b / r2, -a / r2, (-2 * a * b) / r2 ** 2, (a * a - b * b) / r2 ** 2, (2 * a * b) / r2 ** 2];
    },
  ],
  [
    'hypot',
    (m, a, b) => m.hypot(a, b),
    (a, b) => {
      const r = Math.hypot(a, b);
      return [a / r, b / r, (b * b) / r ** 3, (-a * b) / r ** 3, (a * a) / r ** 3];
    },
  ],
];
const positive = fc.double({ min: 0.2, max: 4, noNaN: true });
const close = (found: number, wanted: number) =>
  expect(Math.abs(found - wanted)).toBeLessThan(1e-12 * (1 + Math.abs(wanted)));

describe('dual numbers', () => {
  it.each(table)('%s: value as with plain numbers, derivatives as in the table', (_name, f, derivatives) => {
    fc.assert(
      fc.property(positive, positive, (a, b) => {
        const m = dualNumbers(2, true);
        const { value, slope, curvature } = f(m, m.input(a, 0), m.input(b, 1));
        close(value, f(plainNumbers, a, b));
        const [da, db, aa, ab, bb] = derivatives(a, b);
        [slope[0], slope[1]].forEach((s, i) => {
          close(s, [da, db][i]);
        });
        [...(curvature ?? [])].forEach((c, i) => {
          close(c, [aa, ab, ab, bb][i]);
        });
        expect(curvature).toHaveLength(4);
      }),
    );
  });

  it('follows the chain rule through a long expression', () => {
    fc.assert(
      fc.property(positive, positive, (a, b) => {
        const m = dualNumbers(2, true);
        // exp(ln(a)·ln(b)/2)² = a^ln b: derivative by a is ln b · a^(ln b - 1)
        const y = m.power(m.exp(m.divide(m.multiply(m.log(m.input(a, 0)), m.log(m.input(b, 1))), 2)), 2);
        const lnB = Math.log(b);
        close(y.slope[0] / a ** (lnB - 1), lnB);
        close((y.curvature?.[0] ?? Number.NaN) / a ** (lnB - 2), lnB * (lnB - 1));
      }),
    );
  });

  it('differentiates a function of plain numbers by differences', () => {
    const m = dualNumbers(1, true);
    const { value, slope, curvature } = m.through((x) => x ** 3, m.multiply(2, m.input(1.5, 0)));
    expect(value).toBe(27);
    // step 1e-4: truncation 1e-8 of the slope, rounding 1e-16/1e-8 of the curvature
    expect(slope[0] / 54).toBeCloseTo(1, 7);
    expect((curvature?.[0] ?? Number.NaN) / 72).toBeCloseTo(1, 6);
  });

  it('leaves second derivatives out unless they are asked for', () => {
    const m = dualNumbers(1);
    expect(m.sin(m.input(1, 0)).curvature).toBeNull();
  });

  it('refuses an input that it has no place for', () => {
    expect(() => dualNumbers(2).input(1, 2)).toThrow(RangeError);
  });
});

describe('linear systems in any arithmetic', () => {
  it('differentiates the solution: dx = -A⁻¹ dA x', () => {
    const m = dualNumbers(1);
    const a = m.input(3, 0);
    const [x, y] = solveLinear(
      m,
      [
        [0, 2],
        [a, 1],
      ],
      [4, 8],
    );
    // y = 2, x = (8 - 2)/a
    expect(x.value).toBeCloseTo(2, 14);
    expect(x.slope[0]).toBeCloseTo(-6 / 9, 14);
    expect(y.value).toBe(2);
    expect(y.slope[0]).toBe(0);
  });

  it('fits what it was made of, whatever the weights', () => {
    fc.assert(
      fc.property(positive, positive, positive, (a, b, c) => {
        const t = [0, 1, 2, 3, 4, 5];
        const design = t.map((s) => [1, s, 1e6 * s * s]);
        const readings = t.map((s) => a - b * s + c * s * s);
        const found = leastSquares(plainNumbers, design, readings, [1, 2, 3, 1, 2, 3]);
        close(found[0], a);
        close(found[1], -b);
        close(found[2] * 1e6, c);
      }),
    );
  });

  it.each<[string, () => unknown, RegExp]>([
    [
      'a singular matrix',
      () =>
        solveLinear(
          plainNumbers,
          [
            [1, 2],
            [2, 4],
          ],
          [1, 2],
        ),
      /singular/,
    ],
    ['a matrix that is not square', () => solveLinear(plainNumbers, [[1, 2]], [1]), /columns/],
    ['fewer readings than coefficients', () => leastSquares(plainNumbers, [[1, 2]], [1]), /1 readings for 2/],
    [
      'a column of zeros',
      () =>
        leastSquares(
          plainNumbers,
          [
            [1, 0],
            [1, 0],
          ],
          [1, 2],
        ),
      /a column is zero/,
    ],
  ])('refuses %s', (_name, act, message) => {
    expect(act).toThrow(RangeError);
    expect(act).toThrow(message);
  });
});
