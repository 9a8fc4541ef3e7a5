import { describe, expect, it } from 'vitest';
import { trackability } from '../../analysis/track/trackability.ts';
import { makeMovingBody } from '../../fixtures/movingBody.ts';

const film = {
  widthPx: 120,
  heightPx: 120,
  frameCount: 1,
  noiseSigma: 3,
  path: () => ({ x: 40.3, y: 40.2 }),
  seed: 5,
} as const;

describe('trackability', () => {
  it('lets a marker pass and measures the noise about it', () => {
    const judged = trackability(
      makeMovingBody({ ...film, look: 'bullseye', sizePx: 20 }).frames[0],
      40,
      40,
      13,
    );
    expect(judged.ok).toBe(true);
    // Half the pixels lie on rings whose edges the Laplacian also sees: within 50 % is what it can do there.
    if (judged.ok) expect(judged.noise / 3).toBeGreaterThan(0.7);
    if (judged.ok) expect(judged.noise / 3).toBeLessThan(2.5);
  });

  it('refuses an even background, however noisy', () => {
    for (const noiseSigma of [0, 1, 3, 8]) {
      const { frames } = makeMovingBody({ ...film, noiseSigma, look: 'bullseye', sizePx: 20 });
      expect(trackability(frames[0], 90, 90, 13)).toEqual({ ok: false, reason: 'featureless' });
    }
  });

  it('refuses a straight edge, along which a patch could slide', () => {
    const luma = new Uint8Array(120 * 120);
    for (let i = 0; i < luma.length; i++) luma[i] = i % 120 < 60 ? 40 : 180;
    expect(trackability({ widthPx: 120, heightPx: 120, bitDepth: 8, luma }, 60, 60, 13)).toEqual({
      ok: false,
      reason: 'edgeOnly',
    });
  });
});
