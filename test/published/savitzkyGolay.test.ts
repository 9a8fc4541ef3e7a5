import { sgg } from 'ml-savitzky-golay-generalized';
import { describe, expect, it } from 'vitest';
import { localPolynomial } from '../../analysis/motion/prescribed/localPolynomial.ts';
import { polynomialWindow } from '../../analysis/motion/prescribed/polynomialWindow.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { pieceOf, truthPilot } from '../motion/prescribed/truthPilot.ts';
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

/** Weights on even samples one apart, for the middle one. */
function weightsOf(points: number, degree: number, derivative: number): Float64Array {
  const window = polynomialWindow(
    Float64Array.from({ length: points }, (_, i) => i),
    degree,
  );
  if (!window) throw new Error('too few points');
  return window.weights((points - 1) / 2, derivative);
}

describe('the local polynomial gives the tables of Savitzky & Golay, corrected by Steinier et al. 1972', () => {
  it.each(tables)('$points points, degree $degree, derivative $derivative', (table) => {
    const found = weightsOf(table.points, table.degree, table.derivative);
    const scale = Math.max(...table.weights.map(Math.abs)) / table.norm;
    found.forEach((weight, i) => {
      // Exact integers; the normal equations lose at most a few digits of sixteen.
      expect(Math.abs(weight - table.weights[i] / table.norm)).toBeLessThan(1e-11 * scale);
    });
  });

  it.each(tables)('and their noise: $points points, degree $degree, derivative $derivative', (table) => {
    const gain = Math.hypot(...weightsOf(table.points, table.degree, table.derivative));
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
    weightsOf(points, degree, derivative).forEach((weight, i) => {
      expect(Math.abs(weight * norm - printed[i])).toBeLessThan(1e-10);
    });
  });
});

describe('the method localPolynomial', () => {
  const stepS = 0.002;
  const random = seededRandom(11);
  const piece = pieceOf(
    120,
    stepS,
    (t) => 0.3 * Math.sin(20 * t),
    1e-4,
    () => random.gaussian(),
  );
  const zero = () => 0;

  it.each([
    [2, 7],
    [3, 11],
    [4, 15],
    [5, 21],
  ])(
    'of degree %d over %d frames gives what a general library gives (ml-savitzky-golay-generalized 5.0.0)',
    (degree, windowFrames) => {
      const smoother = localPolynomial
        .with({ method: 'localPolynomial', degree, windowFrames })
        ?.smoother(piece, truthPilot(piece, zero, zero, zero));
      const found = smoother?.apply(piece.valueM);
      const half = (windowFrames - 1) / 2;
      [found?.position, found?.velocity, found?.acceleration].forEach((values, derivative) => {
        const library = sgg(piece.valueM, stepS, {
          windowSize: windowFrames,
          derivative,
          polynomial: degree,
        });
        const size = Math.max(...library.map(Math.abs));
        expect(values).toHaveLength(library.length);
        // The same least squares by other arithmetic. Within half a window of the ends the library shifts its window as well.
        library.forEach((value, i) => {
          if (i >= half && i < library.length - half) {
            expect(Math.abs((values?.[i] ?? Number.NaN) - value)).toBeLessThan(1e-8 * size);
          }
        });
      });
    },
  );
});
