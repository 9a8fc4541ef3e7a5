import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { localPolynomial } from '../../analysis/motion/localPolynomial.ts';

const even = (n: number, stepS = 0.001) => Float64Array.from({ length: n }, (_, i) => i * stepS);
const ones = (n: number, u = 1e-5) => new Float64Array(n).fill(u);

describe('localPolynomial', () => {
  it('gives back a polynomial of its degree and its derivatives, at the ends as in the middle, on uneven times', () => {
    const number = fc.double({ min: -3, max: 3, noNaN: true });
    fc.assert(
      fc.property(fc.array(number, { minLength: 5, maxLength: 5 }), (c) => {
        const t = Float64Array.from({ length: 40 }, (_, i) => i * 0.01 + 0.002 * Math.sin(i * 1.7));
        const f = (x: number) => c.reduce((s, v, k) => s + v * x ** k, 0);
        const f2 = (x: number) => 2 * c[2] + 6 * c[3] * x + 12 * c[4] * x * x;
        const d = localPolynomial(t, t.map(f), ones(40), 0.1, 4);
        for (const i of [0, 1, 17, 39]) {
          expect(d.position[i]).toBeCloseTo(f(t[i]), 8);
          expect(d.acceleration[i]).toBeCloseTo(f2(t[i]), 5);
        }
      }),
    );
  });

  it('scales acceleration by c⁻² when time is scaled by c, and changes its sign with the positions', () => {
    const t = even(60);
    const y = t.map((x) => Math.sin(40 * x));
    const a = localPolynomial(t, y, ones(60), 0.01, 4);
    const slow = localPolynomial(
      t.map((x) => 3 * x),
      y.map((v) => -v),
      ones(60),
      0.03,
      4,
    );
    for (let i = 0; i < 60; i++) expect(slow.acceleration[i] * -9).toBeCloseTo(a.acceleration[i], 4);
  });

  it('propagates noise: the scatter over many records is the stated uncertainty', () => {
    const t = even(41);
    const sums = { a: 0, a2: 0 };
    let state = 7;
    // Park-Miller generator and the sum of twelve uniforms: near enough to normal for a variance.
    const uniform = () => {
      state = (state * 16807) % 2147483647;
      return state / 2147483647;
    };
    const runs = 600;
    let stated = 0;
    for (let k = 0; k < runs; k++) {
      const y = t.map(() => 1e-5 * (Array.from({ length: 12 }, uniform).reduce((s, v) => s + v, 0) - 6));
      const d = localPolynomial(t, y, ones(41), 0.02, 4, undefined, Int32Array.of(20));
      sums.a += d.acceleration[20];
      sums.a2 += d.acceleration[20] ** 2;
      stated = d.uAcceleration[20];
    }
    // Standard error of a standard deviation from 600 runs: 2.9 %; 4 of them.
    expect(Math.sqrt(sums.a2 / runs) / stated).toBeGreaterThan(0.88);
    expect(Math.sqrt(sums.a2 / runs) / stated).toBeLessThan(1.12);
  });

  it('uses nothing beyond its segment: a kink at a break stays a kink', () => {
    const t = even(40);
    const y = t.map((x) => (x < 0.02 ? 0 : -0.5 * 9.81 * (x - 0.02) ** 2));
    const after = localPolynomial(t, y, ones(40), 0.01, 2, { from: 20, to: 40 });
    for (let i = 20; i < 40; i++) expect(after.acceleration[i]).toBeCloseTo(-9.81, 6);
    expect(after.acceleration[19]).toBeNaN();
  });

  it('says nothing where too few points fall in the window', () => {
    const d = localPolynomial(even(10), even(10), ones(10), 0.001, 4);
    expect([...d.acceleration].every(Number.isNaN)).toBe(true);
  });

  it('refuses times that do not increase', () => {
    expect(() => localPolynomial(Float64Array.of(0, 1, 1, 2), even(4), ones(4), 5, 2)).toThrow(RangeError);
  });
});
