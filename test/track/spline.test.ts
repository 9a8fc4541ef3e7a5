import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { quinticCoefficients, quinticWeights, TAPS, TAPS_BEFORE } from '../../analysis/track/spline.ts';

const weights = new Float64Array(TAPS);
const slopes = new Float64Array(TAPS);

describe('quinticWeights', () => {
  it('are the quintic B-spline at whole numbers: 1, 26, 66, 26, 1 over 120', () => {
    // Schoenberg 1946; values from the recursion of the B-splines.
    quinticWeights(0, weights, slopes);
    expect([...weights].map((w) => w * 120)).toEqual([1, 26, 66, 26, 1, 0].map((v) => expect.closeTo(v, 10)));
  });

  it('sum to one and their slopes to zero, at every fraction', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 0.999999, noNaN: true }), (t) => {
        quinticWeights(t, weights, slopes);
        expect(weights.reduce((s, w) => s + w, 0)).toBeCloseTo(1, 12);
        expect(slopes.reduce((s, w) => s + w, 0)).toBeCloseTo(0, 12);
      }),
    );
  });
});

describe('quinticCoefficients', () => {
  it('make a spline that passes through its samples', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0, max: 255, noNaN: true }), { minLength: 24, maxLength: 24 }),
        (line) => {
          const c = quinticCoefficients(Float64Array.from(line), 24, 1);
          quinticWeights(0, weights, slopes);
          for (let i = 3; i < 20; i++) {
            let v = 0;
            for (let k = 0; k < TAPS - 1; k++) v += weights[k] * c[i - TAPS_BEFORE + k];
            expect(v).toBeCloseTo(line[i], 8);
          }
        },
      ),
    );
  });

  it('reproduce a cubic and its slope between the samples', () => {
    const f = (x: number) => 0.02 * x ** 3 - 0.5 * x * x + 3 * x;
    const slope = (x: number) => 0.06 * x * x - x + 3;
    const c = quinticCoefficients(
      Float64Array.from({ length: 60 }, (_, i) => f(i - 30)),
      60,
      1,
    );
    quinticWeights(0.37, weights, slopes);
    let v = 0;
    let s = 0;
    for (let k = 0; k < TAPS; k++) {
      v += weights[k] * c[30 - TAPS_BEFORE + k];
      s += slopes[k] * c[30 - TAPS_BEFORE + k];
    }
    // The mirrored ends are no cubic; 30 samples away their effect is below 0.43^30.
    expect(v).toBeCloseTo(f(0.37), 8);
    expect(s).toBeCloseTo(slope(0.37), 8);
  });
});
