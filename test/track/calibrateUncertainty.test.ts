import { describe, expect, it } from 'vitest';
import { calibrateUncertainty } from '../../analysis/track/calibrateUncertainty.ts';
import type { Track } from '../../analysis/track/track.ts';
import { seededRandom } from '../../fixtures/random.ts';

/** Free fall with autoregressive errors of a given standard deviation and lag-1 correlation, stated as 0.01 px. */
function track(sdPx: number, correlation: number, seed: number): { track: Track; errorPx: Float64Array } {
  const random = seededRandom(seed);
  const n = 400;
  const errorPx = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    errorPx[i] =
      i === 0
        ? sdPx * random.gaussian()
        : correlation * errorPx[i - 1] + sdPx * Math.sqrt(1 - correlation ** 2) * random.gaussian();
  }
  const of = (f: (i: number) => number) => Float64Array.from({ length: n }, (_, i) => f(i));
  return {
    errorPx,
    track: {
      bodyId: 'ball',
      frame: Int32Array.from({ length: n }, (_, i) => i),
      xPx: of(() => 50),
      yPx: of((i) => 40 + 0.002 * i * i + errorPx[i]),
      uXPx: of(() => 0.01),
      uYPx: of(() => 0.01),
      score: of(() => 1),
      state: Array(n).fill('measured'),
    },
  };
}

const coverage = (made: ReturnType<typeof track>) => {
  const { uYPx } = calibrateUncertainty(made.track);
  return made.errorPx.filter((e, i) => Math.abs(e) <= 1.96 * uYPx[i]).length / made.errorPx.length;
};

describe('calibrateUncertainty', () => {
  it('leaves an honest statement alone, to the scatter of a median of 370 points (8 %)', () => {
    const { uYPx } = calibrateUncertainty(track(0.01, 0, 1).track);
    expect(uYPx[200]).toBeGreaterThanOrEqual(0.01);
    expect(uYPx[200]).toBeLessThan(0.0118);
  });

  it.each([
    ['white errors of twice the stated size', 0.02, 0],
    ['errors of three times the stated size that hang together (lag-1 correlation 0.6)', 0.03, 0.6],
  ])('makes 95 %% intervals hold over %s', (_name, sd, correlation) => {
    const all = [1, 2, 3, 4, 5, 6].map((seed) => coverage(track(sd, correlation, seed)));
    const mean = all.reduce((s, v) => s + v, 0) / all.length;
    expect(mean).toBeGreaterThan(0.91);
    expect(mean).toBeLessThan(0.99);
  });

  it('says nothing of a track too short to judge', () => {
    const short = track(0.05, 0, 1).track;
    const cut = { ...short, state: short.state.map((s, i) => (i < 50 ? s : ('lost' as const))) };
    expect(calibrateUncertainty(cut).uYPx[10]).toBe(0.01);
  });
});
