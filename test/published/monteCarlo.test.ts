import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { agreementOf } from '../../analysis/uncertainty/agreement.ts';
import { uOfHalfWidth } from '../../analysis/uncertainty/distribution.ts';
import { measuredBy } from '../../analysis/uncertainty/measured.ts';
import type { InputQuantity, Measurement } from '../../analysis/uncertainty/measurement.ts';
import { monteCarlo } from '../../analysis/uncertainty/monteCarlo.ts';
import { propagate } from '../../analysis/uncertainty/propagate.ts';
import { seededDraws } from '../../analysis/uncertainty/seededDraws.ts';

// JCGM 101:2008, clause 9: inputs and results from memory; those of 9.2 and 9.4 also in closed form.
const gum = JSON.parse(
  readFileSync(new URL('../../fixtures/published/gum-examples.json', import.meta.url), 'utf8'),
);
type Four = 'a' | 'b' | 'c' | 'd';

function sumOfFour(each: readonly Pick<InputQuantity, 'u' | 'distribution'>[]): Measurement<Four, 'y'> {
  const input = (i: number): InputQuantity => ({ source: `input ${i + 1}`, value: 0, ...each[i] });
  return {
    inputs: { a: input(0), b: input(1), c: input(2), d: input(3) },
    outputs: (m, { a, b, c, d }) => ({ y: m.add(a, b, c, d) }),
  };
}
const four = (u: number, distribution: InputQuantity['distribution']) => Array(4).fill({ u, distribution });

describe('Monte Carlo budget', () => {
  const { gaussian4, rectangular4_unit_sd, rectangular_one_sd10 } = gum['S1_9.2_additive'];

  it('gives the sum of four normal quantities of 9.2.2: ± 3.92', () => {
    const drawn = monteCarlo(sumOfFour(four(1, 'normal')), 'y', seededDraws(1));
    // 2 digits of u = 2.0: 0.05
    expect(drawn.settled).toBe(true);
    expect(drawn.tolerance).toBe(0.05);
    expect(Math.abs(drawn.u - gaussian4.u)).toBeLessThan(0.05);
    expect(Math.abs(drawn.high - gaussian4.interval95[1])).toBeLessThan(0.05);
    expect(Math.abs(drawn.low - gaussian4.interval95[0])).toBeLessThan(0.05);
  });

  it('gives the sum of four rectangular quantities of 9.2.3: ± 3.88, not the 3.92 of the normal', () => {
    const drawn = monteCarlo(sumOfFour(four(1, 'rectangular')), 'y', seededDraws(2), {
      blockTrials: 400_000,
      mostTrials: 400_000,
    });
    // scatter of a 2.5 % quantile: √(p q/M)/density = √(0.024/4e5)/0.034 = 0.007; three of it leave 3.92 outside
    expect(Math.abs(drawn.high - rectangular4_unit_sd.exact)).toBeLessThan(0.021);
    expect(Math.abs(drawn.low + rectangular4_unit_sd.exact)).toBeLessThan(0.021);
  });

  it('gives ± 17.0 where one rectangular quantity rules, and finds the law of propagation wrong there (9.2.4)', () => {
    const sources = four(1, 'rectangular');
    sources[3] = { u: 10, distribution: 'rectangular' };
    const measurement = sumOfFour(sources);
    const drawn = monteCarlo(measurement, 'y', seededDraws(3));
    expect(Math.abs(drawn.high - rectangular_one_sd10.exact)).toBeLessThan(0.15); // 3 × √(0.024/M)/0.0147, M ≥ 1e5
    const law = measuredBy(measurement, 'y', 'y', '1');
    expect(law.u).toBeCloseTo(rectangular_one_sd10.u, 1);
    expect(law.U95).toBeCloseTo(rectangular_one_sd10.gumInterval95[1], 1);
    // u = 10.1: half a unit of its first digit is 5, of its second 0.5; the ends differ by 2.9
    expect(agreementOf(law, drawn).digits).toBe(1);
  });

  describe('calibration of a mass standard, 9.3', () => {
    // δm = (mR + δmR)(1 + (ρa - 1.2)(1/ρW - 1/ρR)) - 100 g, in mg
    const mass: Measurement<'mR' | 'dmR' | 'rhoA' | 'rhoW' | 'rhoR', 'dm'> = {
      inputs: {
        mR: { source: 'reference weight', value: 100_000, u: 0.05 },
        dmR: { source: 'comparison', value: 1.234, u: 0.02 },
        rhoA: between('density of air', 1.1, 1.3),
        rhoW: between('density of the weight', 7000, 9000),
        rhoR: between('density of the reference', 7950, 8050),
      },
      outputs: (m, { mR, dmR, rhoA, rhoW, rhoR }) => ({
        dm: m.subtract(
          m.multiply(
            m.add(mR, dmR),
            m.add(1, m.multiply(m.subtract(rhoA, 1.2), m.subtract(m.divide(1, rhoW), m.divide(1, rhoR)))),
          ),
          100_000,
        ),
      }),
    };

    it('by Monte Carlo: 1.2341 mg, u 0.0754, shortest interval 1.0834 to 1.3825', () => {
      const drawn = monteCarlo(mass, 'dm', seededDraws(4), { interval: 'shortest', mostTrials: 400_000 });
      // two digits of u = 0.075: 0.0005 for mean and u; the ends of a shortest interval scatter about five times as much
      expect(Math.abs(drawn.mean - 1.2341)).toBeLessThan(0.0005);
      expect(Math.abs(drawn.u - 0.0754)).toBeLessThan(0.0005);
      expect(Math.abs(drawn.low - 1.0834)).toBeLessThan(0.004);
      expect(Math.abs(drawn.high - 1.3825)).toBeLessThan(0.004);
    });

    it('by the law of propagation: u 0.0539 at first order, 0.0750 with second-order terms', () => {
      const { contributions, u, value } = propagate(mass).outputs.dm;
      expect(value).toBeCloseTo(1.234, 9);
      const first = contributions.filter((c) => c.source !== 'second-order terms').map((c) => c.u);
      expect(Math.hypot(...first)).toBeCloseTo(0.0539, 4);
      // Table 6 prints 0.0750; the bilinear term 100 g u(ρa) u(ρW)/ρ² = 0.0521 mg alone gives it
      expect(Math.abs(u - 0.075)).toBeLessThan(0.00006);
    });
  });

  it.each([
    [0, 50e-6, 150e-6],
    [0.9, 67e-6, 185e-6],
  ])('gives the comparison loss of 9.4 with a correlation of %f', (r, u, high) => {
    // Y = X1² + X2² at 0 with u = 0.005: mean 50e-6; u = 2 σ² √(1 + r²); for r = 0 the 95 % end is 5.991 σ² (chi-squared)
    const loss: Measurement<'x1' | 'x2', 'y'> = {
      inputs: {
        x1: { source: 'real part', value: 0, u: 0.005 },
        x2: { source: 'imaginary part', value: 0, u: 0.005 },
      },
      correlations: r === 0 ? [] : [{ between: ['x1', 'x2'], r }],
      outputs: (m, { x1, x2 }) => ({ y: m.add(m.multiply(x1, x1), m.multiply(x2, x2)) }),
    };
    const drawn = monteCarlo(loss, 'y', seededDraws(5), { interval: 'shortest', mostTrials: 300_000 });
    expect(Math.abs(drawn.mean - 50e-6)).toBeLessThan(0.5e-6);
    expect(Math.abs(drawn.u - u)).toBeLessThan(0.7e-6);
    expect(drawn.low).toBeLessThan(1e-6);
    expect(Math.abs(drawn.high - high)).toBeLessThan(3e-6);
    // At the foot of a square the first order says nothing at all: the second carries u and the shift of the mean
    const { y } = propagate(loss).outputs;
    expect(y.u).toBeCloseTo(2 * 25e-6 * Math.sqrt(1 + r * r), 12);
    expect(y.meanShift).toBeCloseTo(50e-6, 12);
  });

  it('gives the gauge block of 9.5: 50 000 838 nm, u 36 nm (its interval is not remembered well enough)', () => {
    const draw = seededDraws(6);
    const trapezoid = (source: string, halfWidth: number, inexact: number): InputQuantity => ({
      source,
      value: 0,
      u: Math.sqrt(halfWidth ** 2 / 3 + inexact ** 2 / 9),
      distribution: 'curvilinearTrapezoid',
      limitsRel: inexact / halfWidth,
    });
    const block: Measurement<
      'ls' | 'd' | 'd1' | 'd2' | 'alpha' | 'theta' | 'cycle' | 'dAlpha' | 'dTheta',
      'l'
    > = {
      inputs: {
        ls: { source: 'standard', value: 50_000_623, u: 25, distribution: 'studentT', dof: 18 },
        d: { source: 'comparison', value: 215, u: 6, distribution: 'studentT', dof: 24 },
        d1: { source: 'comparator, random', value: 0, u: 4, distribution: 'studentT', dof: 5 },
        d2: { source: 'comparator, systematic', value: 0, u: 7, distribution: 'studentT', dof: 8 },
        alpha: between('expansion coefficient', 9.5e-6, 13.5e-6),
        theta: { source: 'mean temperature', value: -0.1, u: 0.2 },
        cycle: {
          source: 'cycle of temperature',
          value: 0,
          u: uOfHalfWidth(0.5, 'arcsine'),
          distribution: 'arcsine',
        },
        dAlpha: trapezoid('difference of expansion coefficients', 1e-6, 0.1e-6),
        dTheta: trapezoid('difference of temperatures', 0.05, 0.025),
      },
      outputs: (m, x) => ({
        l: m.subtract(
          m.add(x.ls, x.d, x.d1, x.d2),
          m.multiply(
            x.ls,
            m.add(m.multiply(x.dAlpha, m.add(x.theta, x.cycle)), m.multiply(x.alpha, x.dTheta)),
          ),
        ),
      }),
    };
    const drawn = monteCarlo(block, 'l', draw, {
      blockTrials: 100_000,
      mostTrials: 200_000,
    });
    // printed to whole nm; 36 nm of 2e5 trials scatters by 0.06 nm
    expect(Math.abs(drawn.mean - 50_000_838)).toBeLessThan(0.5);
    expect(Math.abs(drawn.u - 36)).toBeLessThan(0.6);
  });
});

function between(source: string, low: number, high: number): InputQuantity {
  return {
    source,
    value: (low + high) / 2,
    u: uOfHalfWidth((high - low) / 2, 'rectangular'),
    distribution: 'rectangular',
  };
}
