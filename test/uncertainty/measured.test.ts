import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { measured } from '../../analysis/uncertainty/measured.ts';
import { studentT } from '../../analysis/uncertainty/studentT.ts';

const size = fc.double({ min: 1e-9, max: 1e3, noNaN: true });
const contribution = fc.record(
  { source: fc.string({ minLength: 1 }), u: size, dof: fc.integer({ min: 1, max: 4000 }) },
  { requiredKeys: ['source', 'u'] },
);
const budget = fc.array(contribution, { minLength: 1, maxLength: 8 });

describe('measured', () => {
  it('has a budget that adds up to u²', () => {
    fc.assert(
      fc.property(budget, (sources) => {
        const m = measured('ball.g', 9.8, 'm/s2', sources);
        const sum = m.budget.reduce((s, b) => s + b.u * b.u, 0);
        expect(Math.abs(sum / (m.u * m.u) - 1)).toBeLessThan(1e-12);
        expect(m.budget.map((b) => b.source)).toEqual(sources.map((s) => s.source));
      }),
    );
  });

  it('expands by the coverage factor of its degrees of freedom', () => {
    fc.assert(
      fc.property(budget, (sources) => {
        const m = measured('ball.g', 9.8, 'm/s2', sources);
        expect(m.k).toBe(studentT(m.dof));
        expect(m.U95).toBe(m.k * m.u);
      }),
    );
  });

  it('has at least the fewest degrees of freedom of its sources and at most their sum', () => {
    // Welch-Satterthwaite lies between min ν and Σν when every source has one (JCGM 100:2008, G.4.1).
    const known = fc.array(
      fc.record({ source: fc.constant('s'), u: size, dof: fc.integer({ min: 1, max: 400 }) }),
      { minLength: 1, maxLength: 6 },
    );
    fc.assert(
      fc.property(known, (sources) => {
        const { dof } = measured('ball.g', 9.8, 'm/s2', sources);
        const each = sources.map((s) => s.dof);
        expect(dof).toBeGreaterThanOrEqual(Math.min(...each));
        expect(dof).toBeLessThanOrEqual(each.reduce((a, b) => a + b));
      }),
    );
  });

  it('of a single source keeps its degrees of freedom', () => {
    fc.assert(
      fc.property(size, fc.integer({ min: 1, max: 4999 }), (u, dof) => {
        expect(measured('ball.g', 9.8, 'm/s2', [{ source: 'positions', u, dof }]).dof).toBe(dof);
      }),
    );
  });

  it('does not depend on the order of its sources', () => {
    fc.assert(
      fc.property(budget, (sources) => {
        const there = measured('ball.g', 9.8, 'm/s2', sources);
        const back = measured('ball.g', 9.8, 'm/s2', [...sources].reverse());
        expect(Math.abs(back.u / there.u - 1)).toBeLessThan(1e-14);
        expect(back.budget).toEqual([...there.budget].reverse());
      }),
    );
  });

  it('leaves sources of no size out of the budget, and knows no limit of freedom without any', () => {
    const m = measured('ball.g', 9.8, 'm/s2', [
      { source: 'clock', u: 0 },
      { source: 'scale bar length', u: 0.01 },
    ]);
    expect(m.budget).toEqual([{ source: 'scale bar length', u: 0.01 }]);
    expect(m.dof).toBeNull();
  });

  it.each([
    [Number.NaN, 0.1, /ball\.g is NaN/],
    [Number.POSITIVE_INFINITY, 0.1, /ball\.g is Infinity/],
    [9.8, -0.1, /ball\.g, clock: standard uncertainty -0\.1/],
    [9.8, Number.NaN, /ball\.g, clock: standard uncertainty NaN/],
  ])('refuses %f with a source of %f', (value, u, message) => {
    expect(() => measured('ball.g', value, 'm/s2', [{ source: 'clock', u }])).toThrow(RangeError);
    expect(() => measured('ball.g', value, 'm/s2', [{ source: 'clock', u }])).toThrow(message);
  });
});

describe('studentT', () => {
  it('falls towards the normal factor as freedom grows, and rises with coverage', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2000 }), fc.integer({ min: 1, max: 2000 }), (nu, more) => {
        expect(studentT(nu + more)).toBeLessThan(studentT(nu));
        expect(studentT(nu)).toBeGreaterThan(studentT(null));
        expect(studentT(nu, 0.99)).toBeGreaterThan(studentT(nu, 0.95));
      }),
    );
  });

  it.each([
    [0, 0.95],
    [-1, 0.95],
    [Number.NaN, 0.95],
    [5, 0],
    [5, 1],
  ])('refuses %f degrees of freedom at coverage %f', (dof, coverage) => {
    expect(() => studentT(dof, coverage)).toThrow(RangeError);
  });
});
