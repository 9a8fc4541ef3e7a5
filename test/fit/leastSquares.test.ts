import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chiSquaredTail } from '../../analysis/fit/chiSquaredTail.ts';
import { linearisedByDifferences } from '../../analysis/fit/differences.ts';
import { lagOneCorrelation } from '../../analysis/fit/lagOneCorrelation.ts';
import { leastSquares } from '../../analysis/fit/leastSquares.ts';
import { withPriors } from '../../analysis/fit/priorRows.ts';
import type { Bounds, Problem } from '../../analysis/fit/problem.ts';
import { unbounded } from '../../analysis/fit/problem.ts';
import { profile } from '../../analysis/fit/profile.ts';
import { settledBy } from '../../analysis/fit/settledBy.ts';
import { whiten } from '../../analysis/fit/whiten.ts';
import { seededRandom } from '../../fixtures/random.ts';

function problemOf(
  residuals: (p: Float64Array) => Float64Array,
  start: number[],
  bounds: readonly Bounds[] = unbounded(start.length),
): Problem {
  return {
    start: Float64Array.from(start),
    bounds,
    residuals,
    linearised: (p) => linearisedByDifferences(residuals, p),
  };
}

function solved(problem: Problem) {
  const found = leastSquares(problem);
  if ('reason' in found) throw new Error(found.reason);
  return found;
}

/** Straight line through points (x, y), each with u = 1. */
const line = (x: readonly number[], y: readonly number[]) => (p: Float64Array) =>
  Float64Array.from(x, (xi, i) => p[0] + p[1] * xi - y[i]);

describe('leastSquares', () => {
  it('gives a straight line with the covariance of the textbook', () => {
    // x = 0 … 4: mean 2, Σ(x - mean)² = 10: variance of the slope 1/10, of the intercept 1/5 + 4/10, covariance -2/10
    const x = [0, 1, 2, 3, 4];
    const { parameters, covariance } = solved(
      problemOf(
        line(
          x,
          x.map((v) => 3 - 2 * v),
        ),
        [0, 0],
      ),
    );
    expect(parameters[0]).toBeCloseTo(3, 9);
    expect(parameters[1]).toBeCloseTo(-2, 9);
    expect(covariance[1][1]).toBeCloseTo(0.1, 9);
    expect(covariance[0][0]).toBeCloseTo(0.6, 9);
    expect(covariance[0][1]).toBeCloseTo(-0.2, 9);
  });

  it('stops at bounds where the least lies beyond, and says so', () => {
    fc.assert(
      fc.property(fc.double({ min: -5, max: 5, noNaN: true }), (aim) => {
        // (p0 - aim, p0 + p1 - 1): with p0 held at its bound, p1 is 1 - p0
        const found = solved(
          problemOf(
            (p) => Float64Array.of(p[0] - aim, p[0] + p[1] - 1),
            [0, 0],
            [
              [-1, 2],
              [-10, 10],
            ],
          ),
        );
        const bounded = Math.min(2, Math.max(-1, aim));
        expect(found.parameters[0]).toBeCloseTo(bounded, 8);
        expect(found.parameters[1]).toBeCloseTo(1 - bounded, 8);
        if (Math.abs(aim - bounded) > 1e-6) expect(found.atBound).toEqual([true, false]);
      }),
    );
  });

  it('gives a parameter that the residuals do not contain an infinite variance', () => {
    const { covariance } = solved(problemOf((p) => Float64Array.of(p[0] - 1, p[0] - 3), [0, 0]));
    expect(covariance[1][1]).toBe(Number.POSITIVE_INFINITY);
    expect(covariance[0][0]).toBeCloseTo(0.5, 9);
  });

  it('gives both of two parameters that only occur as a sum an infinite variance', () => {
    const { covariance } = solved(
      problemOf((p) => Float64Array.of(p[0] + p[1] - 1, 2 * p[0] + 2 * p[1] - 3), [0.2, 0.1]),
    );
    expect(covariance[0][0]).toBe(Number.POSITIVE_INFINITY);
    expect(covariance[1][1]).toBe(Number.POSITIVE_INFINITY);
  });

  it('does not settle on residuals without a value, and says why', () => {
    expect(leastSquares(problemOf(() => Float64Array.of(Number.NaN), [0]))).toEqual({
      reason: 'the model has no value at the start of the fit',
    });
  });

  it('refuses bounds that exclude every value or the start', () => {
    const residuals = (p: Float64Array) => Float64Array.of(p[0]);
    expect(() => leastSquares(problemOf(residuals, [0], [[1, -1]]))).toThrow(/exclude every value/);
    expect(() => leastSquares(problemOf(residuals, [0], [[1, 2]]))).toThrow(/outside its bounds/);
  });
});

describe('priors', () => {
  it('are averaged with the data by their weights', () => {
    // Data 4 with u = 1, prior 1 with u = 1/2: (4 + 4·1)/(1 + 4) = 1.6, variance 1/5
    const found = solved(
      withPriors(
        problemOf((p) => Float64Array.of(p[0] - 4), [0]),
        [{ value: 1, u: 0.5 }],
      ),
    );
    expect(found.parameters[0]).toBeCloseTo(1.6, 10);
    expect(found.covariance[0][0]).toBeCloseTo(0.2, 9);
  });

  it('without uncertainty hold their parameter', () => {
    const found = solved(
      withPriors(
        problemOf((p) => Float64Array.of(p[0] - 4, p[0] + p[1]), [0, 0]),
        [{ value: 1, u: 0 }, null],
      ),
    );
    expect(found.parameters[0]).toBe(1);
    expect(found.parameters[1]).toBeCloseTo(-1, 10);
    expect(found.covariance[0][0]).toBe(0);
  });

  it('are told from footage by how much it narrows them', () => {
    const prior = { value: 1, u: 0.1 };
    const bounds = [0, 2] as const;
    expect(settledBy(0.02, prior, bounds, false)).toBe('footage');
    expect(settledBy(0.07, prior, bounds, false)).toBe('both');
    expect(settledBy(0.0999, prior, bounds, false)).toBe('sheet');
    expect(settledBy(0, { value: 1, u: 0 }, bounds, false)).toBe('held');
    expect(settledBy(0.02, null, bounds, false)).toBe('footage');
    expect(settledBy(0.6, null, bounds, false)).toBe('nothing');
    expect(settledBy(Number.POSITIVE_INFINITY, null, bounds, false)).toBe('nothing');
    expect(settledBy(0.02, null, bounds, true)).toBe('nothing');
  });
});

describe('profile', () => {
  it('follows a curved valley where ± 1.96 u is wrong', () => {
    // One residual, exp(p) - 1, u = 1/2: χ² = 4 (eᵖ - 1)²; 3.8415 = 4 (eᵖ - 1)² at eᵖ = 1 ± 0.97998
    const problem = problemOf((p) => Float64Array.of(2 * (Math.exp(p[0]) - 1)), [0.3]);
    const { from, to } = profile(problem, solved(problem), 0);
    // straight in the root between steps of half a u: 3 %
    expect(to).toBeCloseTo(Math.log(1.97998), 1.5);
    expect(from).toBeLessThan(-1.96 * 0.5 * 2);
  });

  it('has no end where the bound comes first', () => {
    const problem = problemOf((p) => Float64Array.of(p[0]), [0], [[-1, 10]]);
    const { from, to } = profile(problem, solved(problem), 0);
    expect(from).toBeNull();
    expect(to).toBeCloseTo(1.959964, 4);
  });
});

describe('correlated errors', () => {
  const draw = (rho: number, seed: number, n = 4000) => {
    const random = seededRandom(seed);
    let e = random.gaussian();
    return Float64Array.from({ length: n }, () => {
      e = rho * e + Math.sqrt(1 - rho * rho) * random.gaussian();
      return e;
    });
  };
  const frames = Int32Array.from({ length: 4000 }, (_, i) => i);

  it('are seen in residuals, and white ones are not', () => {
    // 1/√n = 0.016: four of them
    expect(Math.abs(lagOneCorrelation(draw(0.5, 1), frames) - 0.5)).toBeLessThan(0.064);
    expect(lagOneCorrelation(draw(0, 2), frames)).toBeLessThan(0.064);
  });

  it('are made white, with variance 1, across gaps too', () => {
    const kept = Array.from(frames).filter((i) => i % 7 !== 3);
    const errors = draw(0.6, 3);
    const white = whiten(
      Float64Array.from(kept, (i) => errors[i]),
      Int32Array.from(kept),
      0.6,
    );
    const variance = white.reduce((s, w) => s + w * w, 0) / white.length;
    // √(2/3400) = 0.024: four of them
    expect(Math.abs(variance - 1)).toBeLessThan(0.1);
    expect(lagOneCorrelation(white, Int32Array.from(white.keys()))).toBeLessThan(0.07);
  });
});

describe('chiSquaredTail', () => {
  it.each([
    // 95 and 99 % points as in every statistical table (NIST/SEMATECH e-Handbook, 1.3.6.7.4; from memory), three decimals
    [3.841, 1, 0.05],
    [5.991, 2, 0.05],
    [18.307, 10, 0.05],
    [124.342, 100, 0.05],
    [6.635, 1, 0.01],
    [135.807, 100, 0.01],
  ])('is above %f on %i degrees of freedom with probability %f', (x, dof, tail) => {
    expect(Math.abs(chiSquaredTail(x, dof) / tail - 1)).toBeLessThan(1e-3);
  });

  it('is exp(-x/2) on two degrees of freedom', () => {
    for (const x of [0.1, 1, 5, 30, 200])
      expect(Math.abs(chiSquaredTail(x, 2) / Math.exp(-x / 2) - 1)).toBeLessThan(1e-12);
  });

  it('is 1 at nothing and refuses no degrees of freedom', () => {
    expect(chiSquaredTail(0, 5)).toBe(1);
    expect(() => chiSquaredTail(1, 0)).toThrow(RangeError);
  });
});
