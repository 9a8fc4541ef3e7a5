import { describe, expect, it } from 'vitest';
import { brightnessOf, plateFrom, plateOf } from '../../analysis/track/plate.ts';
import { startSampling } from '../../analysis/track/sampling.ts';
import { type MovingBody, makeMovingBody } from '../../fixtures/movingBody.ts';

const film: MovingBody = {
  look: 'bullseye',
  sizePx: 20,
  widthPx: 90,
  heightPx: 200,
  frameCount: 200,
  background: 'textured',
  noiseSigma: 2,
  path: (t) => ({ x: 40, y: 30 + Math.max(0, t - 0.12) * 2000 }),
  seed: 7,
};
const empty = makeMovingBody({ ...film, frameCount: 1, noiseSigma: 0, path: () => ({ x: -200, y: -200 }) })
  .frames[0];

describe('plateOf', () => {
  it('shows the background where a body rested for more than half of the footage', () => {
    const { frames } = makeMovingBody(film);
    const sampling = startSampling(31);
    frames.forEach((f, n) => {
      sampling.push(n, f);
    });
    const plate = plateOf(sampling.frames, [{ xPx: 40, yPx: 30, radiusPx: 25, picture: frames[0] }]);
    const errors = Array.from(plate?.level ?? [], (v, i) => v - empty.luma[i]);
    // Mean of the middle half of n frames: noise 2 · 1.1/√n; at the rest place n is about 12, elsewhere 25.
    expect(Math.sqrt(errors.reduce((s, e) => s + e * e, 0) / errors.length)).toBeLessThan(2 * 0.4);
    expect(Math.max(...errors.map(Math.abs))).toBeLessThan(6);
  });

  it('is not made of too few frames', () => {
    const { frames } = makeMovingBody({ ...film, frameCount: 5 });
    expect(
      plateOf(
        frames.map((picture, n) => ({ n, picture })),
        [],
      ),
    ).toBeNull();
  });
});

describe('brightnessOf', () => {
  it('measures a flickering lamp to a thousandth, a body in the picture or not', () => {
    const { frames } = makeMovingBody({ ...film, path: () => ({ x: 40, y: 100 }) });
    const plate = plateFrom(Float32Array.from(empty.luma), 90, 200);
    const dim = { ...frames[0], luma: frames[0].luma.map((v) => Math.round(0.9 * v)) };
    expect(brightnessOf(dim, plate)).toBeCloseTo(0.9, 2);
    expect(brightnessOf(frames[0], plate)).toBeCloseTo(1, 2);
  });
});

describe('startSampling', () => {
  it('keeps frames spread over footage of any length, never more than asked for', () => {
    for (const count of [10, 31, 32, 500, 5000]) {
      const sampling = startSampling(31);
      for (let n = 0; n < count; n++)
        sampling.push(n, { widthPx: 1, heightPx: 1, bitDepth: 8, luma: new Uint8Array(1) });
      const kept = sampling.frames.map((f) => f.n);
      expect(kept.length).toBeLessThanOrEqual(31);
      expect(kept.length).toBeGreaterThanOrEqual(Math.min(count, 16));
      expect(kept.at(-1) ?? 0).toBeGreaterThanOrEqual(count - 1 - count / 15);
    }
  });
});
