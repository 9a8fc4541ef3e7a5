import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { makeMatcher } from '../../analysis/track/match.ts';
import { patchModel } from '../../analysis/track/patchModel.ts';
import { spot, waves } from './analyticPicture.ts';

const half = 15;
const matcher = makeMatcher(half);

describe('match', () => {
  it('recovers a sub-pixel shift of a band-limited pattern to 0.002 px', () => {
    // Shift theorem: the pattern is shifted through its phases (see waves). 16 bit, no noise: what is left is interpolation.
    const model = patchModel(waves(61, 0, 0), 30, 30, half);
    fc.assert(
      fc.property(
        fc.double({ min: -0.5, max: 0.5, noNaN: true }),
        fc.double({ min: -0.5, max: 0.5, noNaN: true }),
        (dx, dy) => {
          const m = matcher.match(waves(61, dx, dy), model, 30, 30, 50, null, 1);
          expect(Math.abs((m?.xPx ?? Number.NaN) - 30 - dx)).toBeLessThan(0.002);
          expect(Math.abs((m?.yPx ?? Number.NaN) - 30 - dy)).toBeLessThan(0.002);
        },
      ),
    );
  });

  it('places a symmetric spot where its centroid is: whole numbers are pixel centres', () => {
    // The spot's centre is given by its formula; a spot centred on pixel (30, 30) is the model.
    const model = patchModel(spot(61, 30, 30, 3), 30, 30, half);
    const m = matcher.match(spot(61, 31.25, 29.6, 3), model, 31, 30, 50, null, 1);
    expect(m?.xPx).toBeCloseTo(31.25, 3);
    expect(m?.yPx).toBeCloseTo(29.6, 3);
  });

  it('does not mind gain and offset', () => {
    const base = waves(61, 0, 0);
    const moved = waves(61, 0.3, -0.2);
    const dimmed = { ...moved, luma: moved.luma.map((v) => Math.round(0.6 * v + 3000)) };
    const m = matcher.match(dimmed, patchModel(base, 30, 30, half), 30, 30, 50, null, 1);
    expect(m?.xPx).toBeCloseTo(30.3, 2);
    expect(m?.yPx).toBeCloseTo(29.8, 2);
    expect(m?.score).toBeGreaterThan(0.999);
  });

  it('moves by whole pixels when the frame does', () => {
    const model = patchModel(waves(61, 0, 0), 30, 30, half);
    const here = matcher.match(waves(61, 0.2, 0.1), model, 30, 30, 50, null, 1);
    const there = matcher.match(waves(61, 3.2, -1.9), model, 33, 28, 50, null, 1);
    // Same fractions of a pixel, so the same interpolation: only the rounding of grey levels differs.
    expect((there?.xPx ?? 0) - (here?.xPx ?? 0)).toBeCloseTo(3, 4);
    expect((there?.yPx ?? 0) - (here?.yPx ?? 0)).toBeCloseTo(-2, 4);
  });

  it('gives nothing when most of the window is outside the picture', () => {
    const model = patchModel(waves(61, 0, 0), 30, 30, half);
    expect(matcher.match(waves(61, 0, 0), model, -8, 30, 50, null, 1)).toBeNull();
  });
});
