import { describe, expect, it } from 'vitest';
import { extensionOf } from '../../analysis/motion/extension.ts';
import { releaseOf } from '../../analysis/motion/release.ts';
import { noisyTrack } from './worldTracks.ts';

const g = 9.81;
const frames = (n: number, rateHz: number, fromS = 0) =>
  Float64Array.from({ length: n }, (_, i) => fromS + i / rateHz);

describe('releaseOf', () => {
  it('finds a release between two frames to well below the frame time, with an honest uncertainty', () => {
    let within = 0;
    const runs = 60;
    for (let seed = 1; seed <= runs; seed++) {
      const releaseS = 0.0203 + 0.0007 * (seed / runs);
      const track = noisyTrack(
        'reference',
        frames(200, 1000),
        (t) => -0.5 * g * Math.max(0, t - releaseS) ** 2,
        20e-6,
        seed,
      );
      const found = releaseOf(track);
      expect(Math.abs((found?.timeS ?? 1) - releaseS)).toBeLessThan(1e-4);
      if (found && Math.abs(found.timeS - releaseS) <= 1.96 * found.uTimeS) within++;
    }
    expect(within / runs).toBeGreaterThan(0.85); // binomial scatter of 60 draws at 95 %: 2.8 %; three of them and a margin
  });

  it('works back to a release before the first frame, and says that no rest was seen', () => {
    const track = noisyTrack('reference', frames(150, 1000, 0.02), (t) => -0.5 * g * t * t, 10e-6, 3);
    const found = releaseOf(track);
    expect(found?.restFrames).toBe(0);
    expect(found?.timeS).toBeCloseTo(0, 3);
  });

  it('finds none in a body that stays where it is', () => {
    expect(releaseOf(noisyTrack('reference', frames(200, 1000), () => 0, 30e-6, 1))).toBeNull();
  });
});

describe('extensionOf', () => {
  /** Falls freely and rebounds sharply from its lowest place. */
  const rebound = (lowestS: number) => (t: number) => {
    const down = -0.5 * g * Math.min(t, lowestS) ** 2;
    return t <= lowestS ? down : down + 3 * (t - lowestS);
  };

  it('is the lowest place, to half a frame', () => {
    for (let k = 0; k < 10; k++) {
      const lowestS = 0.2501 + k * 1e-4;
      const found = extensionOf(
        noisyTrack('tip', frames(280, 1000), rebound(lowestS), 20e-6, k + 1),
        0,
        0,
        { lengthM: 0.31 },
        0.001,
      );
      expect(found.ok).toBe(true);
      if (found.ok) expect(Math.abs(found.extension.timeS - lowestS)).toBeLessThan(0.0006);
    }
  });

  it('is the greatest distance from the anchor where the separation is stated, on whichever side it hangs', () => {
    // A pendulum-like path about an anchor at (±0.1, 0): the distance is largest, 0.31 m, at 0.25 s, the lowest place is later.
    for (const side of [1, -1]) {
      const reach = (t: number) => 0.31 - 0.4 * (t - 0.25) ** 2 - (t > 0.25 ? 0.5 * (t - 0.25) : 0);
      const angle = (t: number) => 1.2 * (0.28 - t);
      const timeS = frames(290, 1000);
      const track = noisyTrack(
        'tip',
        timeS,
        (t) => (t < 0.002 ? 0 : -reach(t) * Math.cos(angle(t))),
        5e-6,
        3,
      );
      const xM = timeS.map((t) => (t < 0.002 ? 0 : side * (0.1 - reach(t) * Math.sin(angle(t)))));
      const found = extensionOf({ ...track, xM }, 0.001, 0, { lengthM: 0.31, separationM: 0.1 }, 0.001);
      expect(found).toMatchObject({ ok: true, extension: { seenAs: 'farthest from the anchor' } });
      if (found.ok) expect(found.extension.timeS).toBeCloseTo(0.25, 3);
    }
  });

  it('says how far the tip was followed when it is not seen to rebound', () => {
    const found = extensionOf(
      noisyTrack('tip', frames(200, 1000), (t) => -0.5 * g * t * t, 20e-6, 1),
      0,
      0,
      { lengthM: 0.31 },
      0.001,
    );
    expect(found).toMatchObject({
      ok: false,
      reason: expect.stringContaining('until it has fallen 0.194 m'),
    });
  });

  it('is not taken in by noise before release nor by a swing far from the stated length', () => {
    const found = extensionOf(
      noisyTrack('tip', frames(280, 1000), rebound(0.15), 20e-6, 2),
      0,
      0,
      { lengthM: 0.9 },
      0.001,
    );
    expect(found.ok).toBe(false);
  });

  it('refuses a fall much longer than the tether', () => {
    const found = extensionOf(
      noisyTrack('tip', frames(280, 1000), rebound(0.25), 20e-6, 2),
      0,
      0,
      { lengthM: 0.1 },
      0.001,
    );
    expect(found).toMatchObject({ ok: false, reason: expect.stringContaining('check tether.lengthM') });
  });
});
