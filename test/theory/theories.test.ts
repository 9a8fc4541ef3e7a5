import { describe, expect, it } from 'vitest';
import { type TheoryInput, theories } from '../../analysis/theory/theories.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { gMps2, lengthM, releaseS, theoryInput, trackAt } from './theoryInput.ts';

const timeS = Float64Array.from({ length: 300 }, (_, i) => i * 0.001);
const startYM = 0.02;
const falling = (t: number) => startYM - 0.5 * gMps2 * Math.max(0, t - releaseS) ** 2;
/** Frames after release: 51 … 299 ms. */
const fallingFrames = 249;

function asked(heightM: (t: number, i: number) => number, rest: Partial<TheoryInput> = {}): TheoryInput {
  return { ...theoryInput('tip', timeS), track: trackAt('tip', timeS, heightM), startYM, ...rest };
}

function chiSquaredOf(input: TheoryInput, model: string) {
  const found = theories(input).find((t) => t.model === model);
  if (!found) throw new Error(`no ${model}`);
  return found;
}

describe('theories', () => {
  it('start their curves at the height of the body and end them where they say no more', () => {
    const all = theories(asked(falling, { untilS: 0.25 }));
    expect(all.map((t) => t.model)).toEqual(['freeFall', 'foldedTetherEnergy', 'foldedTetherMomentum']);
    for (const { curve, body } of all) {
      expect(body).toBe('tip');
      expect(curve.yM[0]).toBe(startYM);
      expect(curve.timeS.at(-1)).toBeCloseTo(0.25, 12);
      for (const values of [curve.yM, curve.vyMps, curve.ayMps2])
        expect(values).toHaveLength(curve.timeS.length);
    }
  });

  it('name what they were worked out with, and how uncertain that is', () => {
    const energy = chiSquaredOf(asked(falling), 'foldedTetherEnergy');
    expect(energy.parameters).toEqual({ gMps2, releaseS, lengthM });
    expect(energy.uParameters).toEqual({ gMps2: 0.0001, releaseS: 0.0001, lengthM: 0.001 });
  });

  it('have no distance from a track that falls as they say', () => {
    const { chiSquared, dof } = chiSquaredOf(asked(falling), 'freeFall');
    expect(chiSquared).toBeLessThan(1e-18);
    expect(dof).toBe(fallingFrames - 2);
  });

  it('count one for each height that is off by its standard uncertainty', () => {
    const off = asked((t, i) => falling(t) + (i % 2 ? 1e-4 : -1e-4));
    expect(chiSquaredOf(off, 'freeFall').chiSquared).toBeCloseTo(fallingFrames, 6);
  });

  it('count the scale at each height too', () => {
    // Lengths 1 % too great, known to 1 %: every height is off by once that and no more.
    const off = asked((t) => startYM + 1.01 * (falling(t) - startYM), { uLengthRel: 0.01 });
    const { chiSquared } = chiSquaredOf(off, 'freeFall');
    expect(chiSquared).toBeLessThan(fallingFrames);
    expect(chiSquared).toBeGreaterThan(0.5 * fallingFrames);
  });

  it('are as far from noise as the noise is large', () => {
    const random = seededRandom(7);
    const noisy = asked((t) => falling(t) + 1e-4 * random.gaussian());
    const { chiSquared } = chiSquaredOf(noisy, 'freeFall');
    // Mean n, standard deviation √(2n) = 22: four of them
    expect(Math.abs(chiSquared - fallingFrames)).toBeLessThan(4 * Math.sqrt(2 * fallingFrames));
  });

  it('tell a freely falling tip from one that a fold pulls', () => {
    const { chiSquared } = chiSquaredOf(asked(falling), 'foldedTetherEnergy');
    // 250 ms after release the energy form is 23 mm ahead, 230 standard uncertainties
    expect(chiSquared).toBeGreaterThan(100 * fallingFrames);
  });
});
