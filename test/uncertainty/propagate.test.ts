import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { resultSchema } from '../../analysis/sheet/result.ts';
import { agreementOf, withMonteCarlo } from '../../analysis/uncertainty/agreement.ts';
import { coverageInterval } from '../../analysis/uncertainty/coverageInterval.ts';
import {
  type Distribution,
  distributions,
  drawStandard,
  uOfExpanded,
  uOfHalfWidth,
  uOfInterval,
} from '../../analysis/uncertainty/distribution.ts';
import { measured, measuredBy } from '../../analysis/uncertainty/measured.ts';
import type { Measurement } from '../../analysis/uncertainty/measurement.ts';
import { monteCarlo } from '../../analysis/uncertainty/monteCarlo.ts';
import { numericalTolerance } from '../../analysis/uncertainty/numericalTolerance.ts';
import { propagate } from '../../analysis/uncertainty/propagate.ts';
import { scaledMeasurement } from '../../analysis/uncertainty/scaledMeasurement.ts';
import { seededDraws } from '../../analysis/uncertainty/seededDraws.ts';

/** Speed from a length and a time. */
const speed = (r?: number): Measurement<'lengthM' | 'timeS', 'speedMps'> => ({
  inputs: {
    lengthM: { source: 'scale bar length', value: 2, u: 0.02, unit: 'm', dof: 9 },
    timeS: { source: 'capture rate', value: 0.5, u: 0.005, unit: 's', distribution: 'rectangular' },
  },
  correlations: r === undefined ? [] : [{ between: ['lengthM', 'timeS'], r }],
  outputs: (m, { lengthM, timeS }) => ({ speedMps: m.divide(lengthM, timeS) }),
});

describe('propagate', () => {
  it('gives each source with its estimate, uncertainty, distribution, sensitivity and freedom', () => {
    const { value, contributions } = propagate(speed()).outputs.speedMps;
    expect(value).toBe(4);
    expect(contributions).toEqual([
      {
        source: 'scale bar length',
        u: 0.04,
        dof: 9,
        distribution: 'normal',
        inputValue: 2,
        uInput: 0.02,
        inputUnit: 'm',
        sensitivity: 2,
      },
      {
        source: 'capture rate',
        u: 0.04,
        distribution: 'rectangular',
        inputValue: 0.5,
        uInput: 0.005,
        inputUnit: 's',
        sensitivity: -8,
      },
    ]);
  });

  it('lets correlated inputs cancel or add up', () => {
    // A quotient of fully correlated inputs of the same relative uncertainty is free of it; anticorrelated it doubles
    expect(propagate(speed(1)).outputs.speedMps.u).toBeLessThan(0.001); // what remains is of second order
    expect(propagate(speed(-1)).outputs.speedMps.u).toBeCloseTo(0.08, 3);
  });

  it('changes nothing when the inputs are stated in another unit or order', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 100, noNaN: true }), (perUnit) => {
        const { inputs } = speed();
        const scaled: Measurement<'timeS' | 'lengthM', 'speedMps'> = {
          inputs: {
            timeS: inputs.timeS,
            lengthM: { source: 'scale bar length', value: 2 * perUnit, u: 0.02 * perUnit },
          },
          outputs: (m, x) => ({ speedMps: m.divide(m.divide(x.lengthM, perUnit), x.timeS) }),
        };
        const there = propagate(speed()).outputs.speedMps;
        const here = propagate(scaled).outputs.speedMps;
        expect(Math.abs(here.u / there.u - 1)).toBeLessThan(1e-12);
      }),
    );
  });

  it('gives a cosine at zero the uncertainty that its first derivative does not have', () => {
    const along: Measurement<'tiltRad', 'g'> = {
      inputs: { tiltRad: { source: 'direction of down', value: 0, u: 0.01 } },
      outputs: (m, { tiltRad }) => ({ g: m.multiply(9.8, m.cos(tiltRad)) }),
    };
    const { u, meanShift, contributions } = propagate(along).outputs.g;
    // variance of 9.8 θ²/2 for normal θ: 9.8 u²/√2; its mean is 9.8 u²/2 lower
    expect(u).toBeCloseTo((9.8 * 1e-4) / Math.SQRT2, 12);
    expect(meanShift).toBeCloseTo(-4.9e-4, 12);
    expect(contributions.map((c) => c.source)).toEqual(['direction of down', 'second-order terms']);
  });

  it.each<[string, () => unknown, RegExp]>([
    ['a negative uncertainty', () => propagate(withInput({ u: -1 })), /clock: standard uncertainty -1/],
    ['an estimate that is no number', () => propagate(withInput({ value: Number.NaN })), /clock is NaN/],
    ['no degrees of freedom', () => propagate(withInput({ dof: 0 })), /clock: 0 degrees/],
    ['a correlation beyond 1', () => propagate(speed(1.1)), /1\.1 of lengthM and timeS is not within/],
    [
      'correlations that contradict each other',
      () => propagate(threeInputs([0.9, 0.9, -0.9])),
      /contradict each other/,
    ],
    ['an output that is no number', () => propagate(withInput({ value: 0 })), /rate is Infinity/],
  ])('refuses %s', (_name, act, message) => {
    expect(act).toThrow(RangeError);
    expect(act).toThrow(message);
  });
});

describe('a key value from its measurement function', () => {
  it('is what measured() makes of the same contributions', () => {
    const { contributions } = propagate(speed()).outputs.speedMps;
    const there = measured('tip.peakSpeed', 4, 'm/s', contributions);
    expect(measuredBy(speed(), 'speedMps', 'tip.peakSpeed', 'm/s')).toEqual(there);
    // u⁴/(0.04⁴/9) with u² = 2 · 0.04²
    expect(there.dof).toBe(36);
  });

  it('carries its Monte Carlo budget and how far both agree, in the form of the contract', () => {
    const law = measuredBy(speed(), 'speedMps', 'tip.peakSpeed', 'm/s');
    const both = withMonteCarlo(law, speed(), 'speedMps', 7);
    expect(resultSchema.shape.keyValues.element.parse(both)).toEqual(both);
    expect(both.monteCarlo).toMatchObject({ seed: 7, settled: true, interval: 'symmetric' });
    // t of 36 degrees of freedom against draws that take u as known, half of them rectangular: 0.115 against 0.107, u 0.057
    expect(both.monteCarlo?.agreesToDigits).toBe(0);
    expect(withMonteCarlo(law, speed(), 'speedMps', 7)).toEqual(both);
  });
});

describe('scaledMeasurement', () => {
  const factors = {
    length: [
      { source: 'scale bar length', uRel: 0.001 },
      { source: 'scale bar marks', uRel: 0.002 },
    ],
    time: [{ source: 'capture rate', uRel: 0.0005 }],
  };

  it('gives common factors by their powers and own sources as they are', () => {
    const speed = scaledMeasurement(12, { length: 1, time: -1 }, factors, [
      { source: 'positions and smoothing', u: 0.03, unit: 'm/s', dof: 12 },
    ]);
    const { value, contributions } = propagate(speed).outputs.y;
    expect(value).toBe(12);
    const rows = contributions.map((c) => [
      c.source,
      Number(c.u.toFixed(9)),
      Number(c.sensitivity?.toFixed(9)),
    ]);
    expect(rows).toEqual([
      ['scale bar length', 0.012, 12],
      ['scale bar marks', 0.024, 12],
      ['capture rate', 0.006, -12],
      ['positions and smoothing', 0.03, 1],
    ]);
    expect(measuredBy(speed, 'y', 'tip.peakSpeed', 'm/s').budget[3].dof).toBe(12);
  });

  it('leaves out what a value does not depend on', () => {
    const time = scaledMeasurement(0.4, { length: 0, time: 1 }, factors, []);
    expect(propagate(time).outputs.y.contributions.map((c) => c.source)).toEqual(['capture rate']);
  });
});

describe('monteCarlo', () => {
  it('agrees with the law of propagation where the measurement is linear and normal', () => {
    const linear = threeInputs([0.5, -0.3, 0.2]);
    const law = measuredBy(linear, 'y', 'y', '1');
    const drawn = monteCarlo(linear, 'y', seededDraws(11));
    expect(agreementOf(law, drawn).digits).toBe(2);
    expect(Math.abs(drawn.u / law.u - 1)).toBeLessThan(0.02); // 3/√(2M), M ≥ 2e4
  });

  it('widens for correlated readings of few degrees of freedom as their Student t does', () => {
    const few = threeInputs([0.5, 0.5, 0.5], { distribution: 'studentT', dof: 4 });
    const drawn = monteCarlo(few, 'y', seededDraws(12));
    // a sum of a multivariate t is a t: scale √(3 + 6·0.5) = √6, t95(4) = 2.776 (JCGM 100, Table G.2)
    expect(Math.abs(drawn.high / (2.776 * Math.sqrt(6)) - 1)).toBeLessThan(0.03);
  });

  it('refuses correlated inputs whose joint distribution is not stated', () => {
    const rectangular = threeInputs([0.5, 0.5, 0.5], { distribution: 'rectangular' });
    expect(() => monteCarlo(rectangular, 'y', seededDraws(1))).toThrow(/must all be normal/);
  });

  it('says when the trials ran out before the figures came to rest', () => {
    const drawn = monteCarlo(speed(), 'speedMps', seededDraws(1), { blockTrials: 50, mostTrials: 100 });
    expect(drawn).toMatchObject({ trials: 100, settled: false });
  });
});

describe('draws', () => {
  const count = 100_000;
  it.each(distributions.filter((d) => d !== 'studentT'))(
    'of a %s have mean 0 and deviation 1',
    (distribution) => {
      const draws = seededDraws(20);
      const values = Array.from({ length: count }, () => drawStandard(distribution, draws, null, 0.5));
      const mean = values.reduce((a, b) => a + b) / count;
      const variance = values.reduce((a, b) => a + b * b, 0) / count;
      // four standard deviations of a mean of 1e5, and of a variance (at most √2 per draw)
      expect(Math.abs(mean)).toBeLessThan(4 / Math.sqrt(count));
      expect(Math.abs(variance - 1)).toBeLessThan((4 * Math.SQRT2) / Math.sqrt(count));
    },
  );

  it.each<[Distribution, number]>([
    ['rectangular', Math.sqrt(3)],
    ['triangular', Math.sqrt(6)],
    ['arcsine', Math.SQRT2],
  ])('of a %s stay within its limits and reach them', (distribution, halfWidth) => {
    const draws = seededDraws(21);
    const values = Array.from({ length: 10_000 }, () => Math.abs(drawStandard(distribution, draws, null)));
    expect(Math.max(...values)).toBeLessThanOrEqual(halfWidth);
    expect(Math.max(...values)).toBeGreaterThan(0.97 * halfWidth);
    expect(uOfHalfWidth(halfWidth, distribution as 'rectangular')).toBeCloseTo(1, 12);
  });

  it('are the same for the same seed and others for another', () => {
    const three = (seed: number) => {
      const draws = seededDraws(seed);
      return [draws.uniform(), draws.gaussian(), draws.gaussian()];
    };
    expect(three(5)).toEqual(three(5));
    expect(three(5)).not.toEqual(three(6));
  });
});

describe('standard uncertainties from what a certificate says', () => {
  it('divides by the coverage factor, or by that of the level', () => {
    expect(uOfExpanded(0.24, 2)).toBe(0.12);
    // JCGM 100:2008, 4.3.4: a 99 % interval of ± 129 µΩ is 2.58 u: 50 µΩ (from memory)
    expect(uOfInterval(129, 0.99)).toBeCloseTo(50, 0);
    expect(() => uOfExpanded(1, 0)).toThrow(RangeError);
  });
});

describe('coverageInterval', () => {
  it('takes the shortest where values are bunched at one end', () => {
    const values = Float64Array.from({ length: 1000 }, (_, i) => (i / 1000) ** 2);
    expect(coverageInterval(values, 0.9, 'shortest').low).toBe(0);
    expect(coverageInterval(values, 0.9, 'symmetric').low).toBeCloseTo(0.0025, 4);
    expect(() => coverageInterval(values, 1, 'shortest')).toThrow(RangeError);
  });
});

describe('numericalTolerance', () => {
  // JCGM 101:2008, 7.9.2, examples from memory: u = 0.00035 is 35e-5 (δ = 0.5e-5) and 4e-4 (δ = 0.5e-4); u = 2 K (δ = 0.5 K)
  it.each<[number, 1 | 2, number]>([
    [0.00035, 2, 0.5e-5],
    [0.00035, 1, 0.5e-4],
    [2, 1, 0.5],
    [0.0996, 2, 0.005],
  ])('of %f to %i digits is %f', (u, digits, tolerance) => {
    expect(numericalTolerance(u, digits)).toBeCloseTo(tolerance, 12);
  });
});

function withInput(change: Partial<Measurement<'x', 'rate'>['inputs']['x']>): Measurement<'x', 'rate'> {
  return {
    inputs: { x: { source: 'clock', value: 1, u: 0.1, ...change } },
    outputs: (m, { x }) => ({ rate: m.divide(1, x) }),
  };
}

function threeInputs(
  [rab, rac, rbc]: readonly number[],
  kind: Partial<Measurement<'a', 'y'>['inputs']['a']> = {},
): Measurement<'a' | 'b' | 'c', 'y'> {
  const input = (source: string) => ({ source, value: 0, u: 1, ...kind });
  return {
    inputs: { a: input('a'), b: input('b'), c: input('c') },
    correlations: [
      { between: ['a', 'b'], r: rab },
      { between: ['a', 'c'], r: rac },
      { between: ['b', 'c'], r: rbc },
    ],
    outputs: (m, { a, b, c }) => ({ y: m.add(a, b, c) }),
  };
}
