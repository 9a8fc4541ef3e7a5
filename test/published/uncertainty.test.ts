import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { polynomialFit } from '../../analysis/motion/polynomialFit.ts';
import { combined, effectiveDof } from '../../analysis/uncertainty/effectiveDof.ts';
import { measured } from '../../analysis/uncertainty/measured.ts';
import { studentT } from '../../analysis/uncertainty/studentT.ts';
import { typeA } from '../../analysis/uncertainty/typeA.ts';
import { publishedRows } from './publishedRows.ts';

// Inputs and results of JCGM 100:2008 (GUM) from memory, each recomputed from its inputs: fixtures/published/gum-examples.json.
const gum = JSON.parse(
  readFileSync(new URL('../../fixtures/published/gum-examples.json', import.meta.url), 'utf8'),
);

interface UnivariateSet {
  readonly n: number;
  readonly mean: string;
  readonly standardDeviation: string;
  /** All values, or the first and a pair with how often it is repeated. */
  readonly values?: readonly string[];
  readonly first?: string;
  readonly repeat?: readonly string[];
  readonly times?: number;
}
const nist: { readonly datasets: Readonly<Record<string, UnivariateSet>> } = JSON.parse(
  readFileSync(new URL('../../fixtures/published/nist-univariate.json', import.meta.url), 'utf8'),
);

describe('typeA', () => {
  it('gives mean and deviation of the twenty temperatures of JCGM 100:2008, 4.4.3', () => {
    const { mean, s, uMean, dof } = typeA(gum['typeA_4.4.3'].readings);
    expect(mean).toBeCloseTo(100.145, 3);
    expect(s).toBeCloseTo(1.489, 3);
    expect(uMean).toBeCloseTo(0.333, 3);
    expect(dof).toBe(19);
  });

  // NIST Statistical Reference Datasets, univariate (public domain); which figures were read and which are from memory stands in
  // fixtures/published/nist-univariate.json. The sets of 1001 are their first value, then a pair 500 times.
  it.each(Object.entries(nist.datasets))('gives the certified mean and deviation of %s', (_name, set) => {
    const readings = (set.values ?? [set.first, ...Array(set.times).fill(set.repeat).flat()]).map(Number);
    expect(readings).toHaveLength(set.n);
    const { mean, s } = typeA(readings);
    const certified = Number(set.mean);
    expect(Math.abs(mean / certified - 1)).toBeLessThan(1e-14);
    // 1e-9 of the mean's rounding: what a double keeps of a tenth beside 1e7 (NumAcc4) is 1e-8 of it
    expect(Math.abs(s / Number(set.standardDeviation) - 1)).toBeLessThan(
      Math.max(1e-13, (4 * Number.EPSILON * Math.abs(certified)) / s),
    );
  });

  it('refuses a single reading', () => {
    expect(() => typeA([1])).toThrow(/two are the least/);
  });
});

describe('Welch-Satterthwaite', () => {
  it('gives the example of JCGM 100:2008, G.4.1', () => {
    // Relative uncertainties 0.25, 0.57, 0.82 % from 10, 5 and 15 readings: u 1.03 %, ν 19.0, t 2.09, U 2.2 % (from memory, computed)
    const { relativeU_percent: u, n } = gum.G4_1_example;
    const sources = [0, 1, 2].map((i) => ({ source: `input ${i + 1}`, u: u[i], dof: n[i] - 1 }));
    expect(combined(sources)).toBeCloseTo(1.03, 2);
    expect(effectiveDof(sources)).toBeCloseTo(18.9987, 4);
    expect(studentT(19)).toBeCloseTo(2.09, 2);
    // 18.9987 is rounded to 19.0 there; here it is truncated to 18 as G.4.2 asks, and U comes out the same to its two digits.
    const m = measured('y', 100, '%', sources);
    expect(m.dof).toBe(18);
    expect(m.U95).toBeCloseTo(2.2, 1);
  });

  it('gives the end gauge of JCGM 100:2008, H.1, and truncates its degrees of freedom', () => {
    // 25, 9.7, 2.9, 16.6 nm with 18, 25.6, 50, 2 degrees of freedom: u 32 nm, ν 16, t99 2.92, U99 93 nm (from memory, computed)
    const { contributions_nm: u, dof } = gum.H1_endGauge;
    const sources = [0, 1, 2, 3].map((i) => ({ source: `component ${i + 1}`, u: u[i], dof: dof[i] }));
    expect(effectiveDof(sources)).toBeCloseTo(16.76, 2);
    const m = measured('l', 50_000_838, 'nm', sources);
    // 16.76, not 17: H.1 takes 16, since t of fewer degrees of freedom is the cautious side.
    expect(m.dof).toBe(16);
    expect(Math.round(m.u)).toBe(32);
    expect(studentT(16, 0.99)).toBeCloseTo(2.92, 2);
    // The 93 printed there is 2.92 times the rounded 32; unrounded it is 92.5.
    expect(studentT(16, 0.99) * m.u).toBeCloseTo(92.5, 1);
    expect(Math.round(2.92 * Math.round(m.u))).toBe(93);
  });
});

describe('studentT', () => {
  const rows = publishedRows('student-t.csv');
  const fractions = { 't68.27': 0.6827, t90: 0.9, t95: 0.95, 't95.45': 0.9545, t99: 0.99, 't99.73': 0.9973 };

  it.each(Object.entries(fractions))('gives column %s of JCGM 100:2008, Table G.2', (column, coverage) => {
    expect(rows.length).toBeGreaterThan(20);
    for (const row of rows) {
      const nu = row.nu === 'inf' ? null : Number(row.nu);
      // Five decimals in the file; computed (scipy), the printed two decimals from memory.
      expect(Math.abs(studentT(nu, coverage) - Number(row[column])), `ν = ${row.nu}`).toBeLessThan(6e-6);
    }
  });

  it.each([
    // As printed in Table G.2 for 95 % (from memory)
    [1, '12.71'],
    [2, '4.30'],
    [5, '2.57'],
    [10, '2.23'],
    [20, '2.09'],
    [50, '2.01'],
    [null, '1.96'],
  ])('with %s degrees of freedom is %s at 95 %%', (nu, printed) => {
    expect(studentT(nu).toFixed(2)).toBe(printed);
  });
});

describe('polynomialFit', () => {
  it('gives the straight line of JCGM 100:2008, H.3: coefficients, their uncertainties and correlation', () => {
    const h3 = gum.H3_thermometer;
    const temperature = Float64Array.from(h3.t_C);
    const correction = Float64Array.from(h3.b_C);
    const n = temperature.length;
    // Unit uncertainties, then the scatter of the residuals, as H.3 does; centre 20 °C, span 1 °C.
    const fit = polynomialFit(temperature, correction, new Float64Array(n).fill(1), 0, n, h3.t0_C, 1, 1);
    const [y1, y2] = fit?.coefficients ?? [];
    const squares = correction.reduce((sum, b, i) => sum + (b - y1 - y2 * (temperature[i] - 20)) ** 2, 0);
    const s = Math.sqrt(squares / (n - 2));
    const [v11, v12, , v22] = fit?.covariance ?? [];
    // Table H.6 (from memory, computed): as many digits as are printed there
    expect(y1).toBeCloseTo(-0.1712, 4);
    expect(y2).toBeCloseTo(0.00218, 5);
    expect(s).toBeCloseTo(0.0035, 4);
    expect(s * Math.sqrt(v11)).toBeCloseTo(0.0029, 4);
    expect(s * Math.sqrt(v22)).toBeCloseTo(0.00067, 5);
    expect(v12 / Math.sqrt(v11 * v22)).toBeCloseTo(-0.93, 3);
  });
});
