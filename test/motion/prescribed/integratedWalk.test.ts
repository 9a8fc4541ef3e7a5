import { Matrix, solve } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { integratedWalk } from '../../../analysis/motion/prescribed/integratedWalk.ts';

const n = 24;
const time = Float64Array.from({ length: n }, (_, i) => i + 0.3 * Math.sin(2 * i));
const u = time.map((_, i) => 1 + 0.4 * (i % 3));
const values = time.map((t) => 5 * Math.sin(t / 3) + Math.cos(7 * t));

describe('integratedWalk', () => {
  it('is the least-squares parabola when the third derivative may not move at all', () => {
    const design = new Matrix(Array.from(time, (t, i) => [1 / u[i], t / u[i], (t * t) / u[i]]));
    const normal = design.transpose().mmul(design);
    const right = design.transpose().mmul(Matrix.columnVector(Array.from(values, (v, i) => v / u[i])));
    const c = solve(normal, right).to1DArray();
    const covariance = solve(normal, Matrix.eye(3));
    const walk = integratedWalk(time, values, u, 1e-24);
    time.forEach((t, i) => {
      expect(walk.position[i]).toBeCloseTo(c[0] + c[1] * t + c[2] * t * t, 7);
      expect(walk.velocity[i]).toBeCloseTo(c[1] + 2 * c[2] * t, 7);
      expect(walk.acceleration[i]).toBeCloseTo(2 * c[2], 8);
      expect(walk.varianceAcceleration[i] / (4 * covariance.get(2, 2))).toBeCloseTo(1, 6);
    });
  });

  it('goes through every point when it may move at will', () => {
    const walk = integratedWalk(time, values, u, 1e12);
    values.forEach((v, i) => {
      expect(walk.position[i]).toBeCloseTo(v, 6);
    });
  });

  // The natural smoothing spline by Reinsch's way (Numer. Math. 10 (1967) 177) carried to the third derivative: with D the scaled
  // third divided differences and G the inner products of the B-splines f''' is made of, (G + q⁻¹ D U² Dᵀ) γ = D y, f = y - q⁻¹ U² Dᵀ γ.
  it.each([1e-4, 1e-2, 1])('is the quintic smoothing spline, density %d', (q) => {
    const rows = n - 3;
    const differences = Matrix.zeros(rows, n);
    for (let j = 0; j < rows; j++) {
      for (let k = j; k <= j + 3; k++) {
        let product = 6;
        for (let m = j; m <= j + 3; m++) if (m !== k) product /= time[k] - time[m];
        differences.set(j, k, product);
      }
    }
    const gram = Matrix.zeros(rows, rows);
    for (let a = 0; a < rows; a++)
      for (let b = a; b < Math.min(rows, a + 3); b++) {
        const product = innerProduct(a, b);
        gram.set(a, b, product);
        gram.set(b, a, product);
      }
    const variances = Matrix.diag(Array.from(u, (v) => (v * v) / q));
    const y = Matrix.columnVector(Array.from(values));
    const gamma = solve(
      Matrix.add(gram, differences.mmul(variances).mmul(differences.transpose())),
      differences.mmul(y),
    );
    const spline = Matrix.sub(y, variances.mmul(differences.transpose()).mmul(gamma)).to1DArray();
    const walk = integratedWalk(time, values, u, q);
    spline.forEach((f, i) => {
      expect(walk.position[i]).toBeCloseTo(f, 7);
    });
  });
});

/** Kernel of the third divided difference at j, 6 [t_j … t_{j+3}] (t - x)₊²/2: a B-spline of degree 2. */
function kernel(j: number, x: number): number {
  let sum = 0;
  for (let k = j; k <= j + 3; k++) {
    let product = 3 * Math.max(0, time[k] - x) ** 2;
    for (let m = j; m <= j + 3; m++) if (m !== k) product /= time[k] - time[m];
    sum += product;
  }
  return sum;
}

/** Gauss's rule of three points is exact for the products of degree 4 between knots. */
function innerProduct(a: number, b: number): number {
  const nodes = [-Math.sqrt(0.6), 0, Math.sqrt(0.6)];
  const weights = [5 / 9, 8 / 9, 5 / 9];
  let sum = 0;
  for (let k = b; k < a + 3; k++) {
    const half = (time[k + 1] - time[k]) / 2;
    const middle = (time[k + 1] + time[k]) / 2;
    nodes.forEach((x, p) => {
      const at = middle + half * x;
      sum += half * weights[p] * kernel(a, at) * kernel(b, at);
    });
  }
  return sum;
}
