import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { dofOfReliability, uOfHalfWidth } from '../../analysis/uncertainty/distribution.ts';
import { leastSquares } from '../../analysis/uncertainty/linearSystem.ts';
import { measuredBy } from '../../analysis/uncertainty/measured.ts';
import type { Measurement } from '../../analysis/uncertainty/measurement.ts';
import { propagate } from '../../analysis/uncertainty/propagate.ts';
import { studentT } from '../../analysis/uncertainty/studentT.ts';
import { typeA } from '../../analysis/uncertainty/typeA.ts';

// JCGM 100:2008 (GUM), from memory; every result recomputed from its inputs by another program
// (fixtures/published/gum-examples.json). Here only the measurement function is stated: no sensitivity is.
const gum = JSON.parse(
  readFileSync(new URL('../../fixtures/published/gum-examples.json', import.meta.url), 'utf8'),
);

describe('budget from a measurement function', () => {
  // H.1: l = ls + d - ls (δα θ + αs δθ), lengths in nm. Inputs of H.1.2 and H.1.3 from memory.
  const endGauge: Measurement<'ls' | 'd' | 'deltaAlpha' | 'theta' | 'alpha' | 'deltaTheta', 'l'> = {
    inputs: {
      ls: { source: 'standard', value: 50_000_623, u: 25, dof: 18 },
      d: { source: 'comparison', value: 215, u: 9.7, dof: 25.6 },
      deltaAlpha: {
        source: 'difference of expansion coefficients',
        value: 0,
        u: uOfHalfWidth(1e-6, 'rectangular'),
        distribution: 'rectangular',
        // "estimated to be reliable to 10 percent": ν = 50
        dof: dofOfReliability(0.1),
      },
      theta: { source: 'temperature of the bed', value: -0.1, u: 0.41 },
      alpha: {
        source: 'expansion coefficient',
        value: 11.5e-6,
        u: uOfHalfWidth(2e-6, 'rectangular'),
        distribution: 'rectangular',
      },
      deltaTheta: {
        source: 'difference of temperatures',
        value: 0,
        u: uOfHalfWidth(0.05, 'rectangular'),
        distribution: 'rectangular',
        // "reliable to 50 percent": ν = 2
        dof: dofOfReliability(0.5),
      },
    },
    outputs: (m, { ls, d, deltaAlpha, theta, alpha, deltaTheta }) => ({
      l: m.subtract(
        m.add(ls, d),
        m.multiply(ls, m.add(m.multiply(deltaAlpha, theta), m.multiply(alpha, deltaTheta))),
      ),
    }),
  };

  it('gives the end gauge of H.1: contributions, u, degrees of freedom, U', () => {
    const { outputs } = propagate(endGauge);
    expect(outputs.l.value).toBeCloseTo(50_000_838, 9);
    const u = Object.fromEntries(outputs.l.contributions.map((c) => [c.source, c.u]));
    // Table H.1: 25, 9.7, 2.9, 16.6 nm; temperature and expansion coefficient do not contribute at first order
    expect(u.standard).toBeCloseTo(25, 9);
    expect(u.comparison).toBeCloseTo(9.7, 9);
    expect(u['difference of expansion coefficients']).toBeCloseTo(2.9, 1);
    expect(u['difference of temperatures']).toBeCloseTo(16.6, 1);
    expect(u['temperature of the bed']).toBe(0);
    expect(u['expansion coefficient']).toBe(0);
    // first order: 32 nm, ν 16 (16.76 truncated, 2 and 50 exact here), t99 2.92, U99 93 nm
    const first = outputs.l.contributions.filter((c) => c.source !== 'second-order terms');
    const uFirst = Math.hypot(...first.map((c) => c.u));
    expect(Math.round(uFirst)).toBe(32);
    expect(Math.round(studentT(16, 0.99) * Math.round(uFirst))).toBe(93);
  });

  it('adds the second-order terms of H.1.7: 11.7 nm and 1.7 nm, 34 nm in all', () => {
    const { outputs } = propagate(endGauge);
    const second = outputs.l.contributions.find((c) => c.source === 'second-order terms');
    // ls u(δα) u(θ) = 11.7 nm and ls u(αs) u(δθ) = 1.7 nm
    expect(second?.u).toBeCloseTo(Math.hypot(11.7, 1.7), 0);
    expect(Math.round(outputs.l.u)).toBe(34);
  });

  it('truncates the degrees of freedom of H.1 in the key value', () => {
    const { budget, dof, u, U95, k } = measuredBy(endGauge, 'l', 'length', 'nm');
    // With the second-order terms (unlimited) 33.8 nm instead of 31.7: 16.76 × (33.8/31.7)⁴ = 21.8
    expect(dof).toBe(21);
    expect(U95).toBeCloseTo(k * u, 9);
    expect(budget[0]).toMatchObject({ source: 'standard', sensitivity: 1, uInput: 25, dof: 18 });
  });

  it('gives resistance, reactance and impedance of H.2 with their correlations', () => {
    const { V, I_mA: I, phi } = gum.H2_impedance;
    const [v, i, p] = [typeA(V), typeA(I), typeA(phi)];
    const correlation = (a: number[], b: number[]) => {
      const [ma, mb] = [typeA(a), typeA(b)];
      const product = a.reduce((sum, x, k) => sum + (x - ma.mean) * (b[k] - mb.mean), 0);
      return product / (a.length - 1) / (ma.s * mb.s);
    };
    const impedance: Measurement<'v' | 'i' | 'phi', 'R' | 'X' | 'Z'> = {
      inputs: {
        v: { source: 'voltage', value: v.mean, u: v.uMean, dof: v.dof, distribution: 'studentT' },
        i: {
          source: 'current',
          value: i.mean / 1000,
          u: i.uMean / 1000,
          dof: i.dof,
          distribution: 'studentT',
        },
        phi: { source: 'phase', value: p.mean, u: p.uMean, dof: p.dof, distribution: 'studentT' },
      },
      correlations: [
        { between: ['v', 'i'], r: correlation(V, I) },
        { between: ['v', 'phi'], r: correlation(V, phi) },
        { between: ['i', 'phi'], r: correlation(I, phi) },
      ],
      outputs: (m, x) => {
        const Z = m.divide(x.v, x.i);
        return { R: m.multiply(Z, m.cos(x.phi)), X: m.multiply(Z, m.sin(x.phi)), Z };
      },
    };
    const { outputs, correlation: r } = propagate(impedance);
    const { recomputed } = gum.H2_impedance;
    for (const of of ['R', 'X', 'Z'] as const) {
      // nine and seven digits in the file
      expect(outputs[of].value, of).toBeCloseTo(recomputed[of], 6);
      expect(outputs[of].u, of).toBeCloseTo(recomputed[`u${of}`], 6);
    }
    expect(r('R', 'X')).toBeCloseTo(recomputed.rRX, 6);
    expect(r('R', 'Z')).toBeCloseTo(recomputed.rRZ, 6);
    expect(r('X', 'Z')).toBeCloseTo(recomputed.rXZ, 6);
    // Readings taken together five times: one scatter with 4 degrees of freedom, not three
    const resistance = measuredBy(impedance, 'R', 'resistance', 'Ω');
    expect(resistance.dof).toBe(4);
    expect(resistance.correlations).toHaveLength(3);
    expect(resistance.correlations?.[0].between).toEqual(['voltage', 'current']);
  });

  it('gives the line of H.3 and its prediction at 30 °C when the readings are the inputs', () => {
    const h3 = gum.H3_thermometer;
    const { s } = h3;
    const names = h3.b_C.map((_: number, k: number) => `b${k}`) as string[];
    const line: Measurement<string, 'y1' | 'y2' | 'b30'> = {
      inputs: Object.fromEntries(
        names.map((name, k) => [name, { source: name, value: h3.b_C[k], u: h3.recomputed.s }]),
      ),
      outputs: (m, x) => {
        const [y1, y2] = leastSquares(
          m,
          h3.t_C.map((t: number) => [1, t - h3.t0_C]),
          names.map((name) => x[name]),
        );
        return { y1, y2, b30: m.add(y1, m.multiply(y2, 30 - h3.t0_C)) };
      },
    };
    const { outputs, correlation } = propagate(line);
    const { recomputed } = h3;
    // Table H.6: as many digits as the recomputed figures have, s with five
    expect(outputs.y1.value).toBeCloseTo(recomputed.y1, 7);
    expect(outputs.y1.u).toBeCloseTo(recomputed.uy1, 6);
    expect(outputs.y2.value).toBeCloseTo(recomputed.y2, 6);
    expect(outputs.y2.u).toBeCloseTo(recomputed.uy2, 7);
    expect(correlation('y1', 'y2')).toBeCloseTo(recomputed.r, 6);
    expect(outputs.b30.value).toBeCloseTo(recomputed.b30, 6);
    expect(outputs.b30.u).toBeCloseTo(recomputed.ub30, 6);
    expect(s).toBe(0.0035);
  });
});
