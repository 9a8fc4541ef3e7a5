import { describe, expect, it } from 'vitest';
import { linearisedByDifferences } from '../../analysis/fit/differences.ts';
import { leastSquares } from '../../analysis/fit/leastSquares.ts';
import { unbounded } from '../../analysis/fit/problem.ts';
import { nistSet } from './nistSet.ts';

// NIST Statistical Reference Datasets, nonlinear regression (NIST/ITL, US government, public domain): the model as each file
// states it, certified parameters and standard deviations, from both of its starts.
const { exp } = Math;
const models: Record<string, (x: number, b: Float64Array) => number> = {
  Misra1a: (x, b) => b[0] * (1 - exp(-b[1] * x)),
  Chwirut2: (x, b) => exp(-b[0] * x) / (b[1] + b[2] * x),
  Lanczos3: (x, b) => b[0] * exp(-b[1] * x) + b[2] * exp(-b[3] * x) + b[4] * exp(-b[5] * x),
  Gauss1: (x, b) =>
    b[0] * exp(-b[1] * x) + b[2] * exp(-(((x - b[3]) / b[4]) ** 2)) + b[5] * exp(-(((x - b[6]) / b[7]) ** 2)),
  DanWood: (x, b) => b[0] * x ** b[1],
  Hahn1: (x, b) => (b[0] + x * (b[1] + x * (b[2] + x * b[3]))) / (1 + x * (b[4] + x * (b[5] + x * b[6]))),
  MGH17: (x, b) => b[0] + b[1] * exp(-x * b[3]) + b[2] * exp(-x * b[4]),
  Rat43: (x, b) => b[0] / (1 + exp(b[1] - b[2] * x)) ** (1 / b[3]),
  Bennett5: (x, b) => b[0] * (b[1] + x) ** (-1 / b[2]),
  BoxBOD: (x, b) => b[0] * (1 - exp(-b[1] * x)),
  Eckerle4: (x, b) => (b[0] / b[1]) * exp(-0.5 * ((x - b[2]) / b[1]) ** 2),
  Thurber: (x, b) => (b[0] + x * (b[1] + x * (b[2] + x * b[3]))) / (1 + x * (b[4] + x * (b[5] + x * b[6]))),
};

/** Digits that agree: -log10 of the relative difference. */
const digits = (found: number, certified: number) => -Math.log10(Math.abs(found / certified - 1) + 1e-16);

describe.each(Object.keys(models))('least squares on %s', (name) => {
  const set = nistSet(name);
  const model = models[name];

  it.each([
    [1, set.starts[0]],
    [2, set.starts[1]],
  ])('reaches the certified values from start %i', (_, start) => {
    const residuals = (b: Float64Array) => Float64Array.from(set.x, (x, i) => model(x, b) - set.y[i]);
    const found = leastSquares(
      {
        start,
        bounds: unbounded(start.length),
        residuals,
        linearised: (b) => linearisedByDifferences(residuals, b),
      },
      { mostSteps: 5000 },
    );
    if ('reason' in found) throw new Error(found.reason);
    const dof = set.x.length - start.length;
    const worst = { parameter: 99, deviation: 99 };
    set.certified.forEach((certified, j) => {
      worst.parameter = Math.min(worst.parameter, digits(found.parameters[j], certified));
      const deviation = Math.sqrt((found.covariance[j][j] * found.chiSquared) / dof);
      worst.deviation = Math.min(worst.deviation, digits(deviation, set.standardDeviations[j]));
    });
    expect(worst.parameter).toBeGreaterThan(6);
    expect(worst.deviation).toBeGreaterThan(4);
    expect(digits(found.chiSquared, set.residualSumOfSquares)).toBeGreaterThan(6);
  });
});
