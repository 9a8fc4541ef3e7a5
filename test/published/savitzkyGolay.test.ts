import { describe, expect, it } from 'vitest';
import { polynomialFit } from '../../analysis/motion/polynomialFit.ts';
import { publishedRows } from './publishedRows.ts';

// A. Savitzky & M. J. E. Golay, Anal. Chem. 36 (1964) 1627, corrected by Steinier et al. 1972 (Anal. Chem. 44 (1972) 1906). The
// short tables from memory; all computed in exact rationals from the least-squares definition, so free of the misprints of 1964.
const tables = publishedRows('savitzky-golay.csv').map((r) => ({
  points: Number(r.points),
  degree: Number(r.degree),
  derivative: Number(r.derivative),
  norm: Number(r.norm),
  noiseGain: Number(r.noiseGain),
  weights: r.weights.split(' ').map(Number),
}));

const factorial = [1, 1, 2];

/** Fit through even samples one apart, evaluated in the middle. */
function fitOf(values: Float64Array, degree: number) {
  const n = values.length;
  const half = (n - 1) / 2;
  const timeS = Float64Array.from({ length: n }, (_, i) => i - half);
  const fit = polynomialFit(timeS, values, new Float64Array(n).fill(1), 0, n, 0, half, degree);
  if (!fit) throw new Error('too few points');
  return { fit, half };
}

/** The weights of the estimator, one by one from unit impulses. */
function weightsOf(points: number, degree: number, derivative: number): number[] {
  return Array.from({ length: points }, (_, at) => {
    const { fit, half } = fitOf(
      new Float64Array(points).map((_v, i) => (i === at ? 1 : 0)),
      degree,
    );
    return (factorial[derivative] * fit.coefficients[derivative]) / half ** derivative;
  });
}

describe('polynomialFit gives the tables of Savitzky & Golay, corrected by Steinier et al. 1972', () => {
  it.each(tables)('$points points, degree $degree, derivative $derivative', (table) => {
    const found = weightsOf(table.points, table.degree, table.derivative);
    const scale = Math.max(...table.weights.map(Math.abs)) / table.norm;
    found.forEach((weight, i) => {
      // Exact integers; the normal equations lose at most a few digits of sixteen.
      expect(Math.abs(weight - table.weights[i] / table.norm)).toBeLessThan(1e-11 * scale);
    });
  });

  it.each(tables)('and their noise: $points points, degree $degree, derivative $derivative', (table) => {
    const { fit, half } = fitOf(new Float64Array(table.points), table.degree);
    const k = table.derivative;
    const variance = fit.covariance[k * (table.degree + 1) + k];
    const gain = (factorial[k] * Math.sqrt(variance)) / half ** k;
    // Nine significant digits in the table: rounding is up to 5e-9 of the value.
    expect(Math.abs(gain / table.noiseGain - 1)).toBeLessThan(5e-9);
  });

  it.each([
    // As printed in the paper, from memory
    ['5 points, quadratic', 5, 2, 0, 35, [-3, 12, 17, 12, -3]],
    ['7 points, quadratic', 7, 2, 0, 21, [-2, 3, 6, 7, 6, 3, -2]],
    ['9 points, quadratic', 9, 2, 0, 231, [-21, 14, 39, 54, 59, 54, 39, 14, -21]],
    ['5 points, second derivative', 5, 2, 2, 7, [2, -1, -2, -1, 2]],
    ['7 points, second derivative', 7, 2, 2, 42, [5, 0, -3, -4, -3, 0, 5]],
    ['5 points, first derivative of the cubic', 5, 3, 1, 12, [1, -8, 0, 8, -1]],
  ])('%s', (_name, points, degree, derivative, norm, printed) => {
    const found = weightsOf(points, degree, derivative).map((w) => w * norm);
    found.forEach((weight, i) => {
      expect(Math.abs(weight - printed[i])).toBeLessThan(1e-10);
    });
  });
});
