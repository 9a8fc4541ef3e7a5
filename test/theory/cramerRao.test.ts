import { inverse, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { type FitSetting, type FittedModel, fitModel } from '../../analysis/theory/fitModel.ts';
import { inMetres, inPixels } from '../../analysis/theory/measure.ts';
import { foldedTetherEnergy, foldedTetherShare } from '../../analysis/theory/models/foldedTether.ts';
import type { Model } from '../../analysis/theory/models/model.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { foldedFall, recordOf } from './foldedRecord.ts';
import { gMps2, statedOf } from './theoryInput.ts';

// Bound and truth come from the independent integration of foldedRecord.ts, its derivatives by differences of whole falls.
const truth = { releaseS: 0.0504, startYM: 0, lengthM: 0.9, energyShare: 0.7 };
type Truth = typeof truth;
const noiseM = 25e-6;
const record = { captureRateHz: 500, releaseS: truth.releaseS, lastS: 0.4, noiseM };
const timeS = Float64Array.from({ length: 201 }, (_, i) => i / 500);

const heights = ({ releaseS, startYM, lengthM, energyShare }: Truth) =>
  foldedFall(
    { lengthM, gMps2, energyShare, endWeightShare: 0 },
    timeS.map((t) => Math.max(0, t - releaseS)),
  ).map((x) => startYM - x);

const stated = {
  ...statedOf('tip', { uLengthM: null }),
  gravity: { gMps2, uGMps2: 0 },
};
const setting: FitSetting = {
  releaseS: 0.0502,
  uReleaseS: 0.0001,
  startYM: 0,
  uStartYM: 1e-5,
  frameTimeS: 0.002,
  uLengthRel: 0,
  uTimeRel: 0,
  correlation: 0,
  robust: null,
};

function fitted(model: Model, seed: number): FittedModel {
  const track = recordOf(
    (t) =>
      foldedFall({ lengthM: truth.lengthM, gMps2, energyShare: truth.energyShare, endWeightShare: 0 }, t),
    { ...record, seed },
  );
  const found = fitModel(model, stated, inMetres(track, { from: 0, to: track.timeS.length }), setting);
  if ('reason' in found) throw new Error(found.reason);
  return found;
}

/** Fisher's information of independent heights of one noise, from slopes over ± a step of each parameter. */
function information(names: readonly (keyof Truth)[]): Matrix {
  const slopes = names.map((name) => {
    const step = 1e-5;
    const [above, below] = [step, -step].map((h) => heights({ ...truth, [name]: truth[name] + h }));
    return above.map((y, i) => (y - below[i]) / (2 * step * noiseM));
  });
  return new Matrix(slopes.map((a) => slopes.map((b) => a.reduce((sum, v, i) => sum + v * b[i], 0))));
}

describe('a fit of the right model', () => {
  const names = ['releaseS', 'startYM', 'lengthM', 'energyShare'] as const;
  const fisher = information(names);
  const runs = 100;
  const fits = Array.from({ length: runs }, (_, seed) => fitted(foldedTetherShare, seed + 1));

  it('attains the Cramér-Rao bound', () => {
    // d'Fd of a bound-attaining estimate has mean 4; its root over 100 runs scatters by √(2/400)/2 = 3.5 %: 0.9 to 1.1 is ± 2.8 of it.
    let sum = 0;
    for (const { values } of fits) {
      const d = Matrix.columnVector(names.map((name) => values[name] - truth[name]));
      sum += d.transpose().mmul(fisher).mmul(d).get(0, 0);
    }
    const ratio = Math.sqrt(sum / (4 * runs));
    expect(ratio).toBeGreaterThan(0.9);
    expect(ratio).toBeLessThan(1.1);
  });

  it('states the bound as its uncertainty', () => {
    const bound = inverse(fisher);
    names.forEach((name, j) => {
      // The derivative is taken at each draw's own values; they are near the truth: 2 %
      expect(Math.abs(fits[0].u[name] / Math.sqrt(bound.get(j, j)) - 1), name).toBeLessThan(0.02);
    });
  });

  it('has a chi-squared of one for each degree of freedom', () => {
    const mean = fits.reduce((sum, { solution, dof }) => sum + solution.chiSquared / dof, 0) / runs;
    // √(2/(197·100)) = 1 %
    expect(Math.abs(mean - 1)).toBeLessThan(0.04);
    for (const { solution, dof } of fits) {
      // five standard deviations of one run
      expect(Math.abs(solution.chiSquared / dof - 1)).toBeLessThan(5 * Math.sqrt(2 / dof));
    }
  });

  it('is told from the wrong one, whose chi-squared is far from it', () => {
    for (const seed of [1, 2, 3]) {
      const { solution, dof } = fitted(foldedTetherEnergy, seed);
      expect(solution.chiSquared / dof).toBeGreaterThan(2);
    }
  });
});

describe('a fit straight to pixels', () => {
  // A camera that looks up by some degrees: x = (a x + b y + c)/(1 + p y), 2 px/mm at the start and 8 % less at the end.
  const toPicture = (xM: number, yM: number) => {
    const depth = 1 - 0.09 * yM;
    return { x: 400 + (2000 * xM + 20 * yM) / depth, y: 60 - (2000 * yM) / depth };
  };
  const uPx = 0.05;
  const clean = heights(truth);

  it('finds what the fall is made of, through perspective', () => {
    let sum = 0;
    const runs = 20;
    for (let seed = 1; seed <= runs; seed++) {
      const random = seededRandom(seed);
      const places = Array.from(clean, (y) => toPicture(0.1, y));
      const found = fitModel(
        foldedTetherShare,
        stated,
        inPixels(
          {
            timeS,
            frame: Int32Array.from(timeS.keys()),
            xPx: Float64Array.from(places, (p) => p.x + uPx * random.gaussian()),
            yPx: Float64Array.from(places, (p) => p.y + uPx * random.gaussian()),
            uPx: new Float64Array(timeS.length).fill(uPx),
            xM: new Float64Array(timeS.length).fill(0.1),
          },
          toPicture,
        ),
        setting,
      );
      if ('reason' in found) throw new Error(found.reason);
      for (const name of ['releaseS', 'startYM', 'lengthM', 'energyShare'] as const)
        sum += ((found.values[name] - truth[name]) / found.u[name]) ** 2 / (4 * runs);
      expect(Math.abs(found.solution.chiSquared / found.dof - 1)).toBeLessThan(5 * Math.sqrt(2 / found.dof));
    }
    // Mean of 80 squares, in part correlated: about ± 0.25
    expect(sum).toBeGreaterThan(0.4);
    expect(sum).toBeLessThan(1.8);
  });
});
