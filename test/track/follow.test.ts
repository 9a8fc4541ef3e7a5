import { beforeAll, describe, expect, it } from 'vitest';
import { bridgeGaps } from '../../analysis/track/bridge.ts';
import type { Picture, WideSearch } from '../../analysis/track/track.ts';
import { type MovingBody, makeMovingBody } from '../../fixtures/movingBody.ts';
import { loadWideSearch } from '../../main/jobs/wideSearch.ts';
import { followFilm } from './followFilm.ts';

let search: WideSearch;
beforeAll(async () => {
  search = await loadWideSearch();
});

/** At rest for 25 frames, then falling freely at 400 px/m with a little drift. */
const falls: Pick<MovingBody, 'widthPx' | 'heightPx' | 'frameCount' | 'path'> = {
  widthPx: 110,
  heightPx: 330,
  frameCount: 320,
  path: (t) => {
    const f = Math.max(0, t - 0.025);
    return { x: 50.3 + 15 * f, y: 35.2 + 0.5 * 9.81 * 400 * f * f };
  },
};

function scatter(
  found: readonly { xPx: number; yPx: number }[],
  truth: { xPx: Float64Array; yPx: Float64Array },
) {
  const ex = found.map((s, n) => s.xPx - truth.xPx[n]);
  const ey = found.map((s, n) => s.yPx - truth.yPx[n]);
  const sd = (e: number[]) => {
    const mean = e.reduce((s, v) => s + v, 0) / e.length;
    return Math.sqrt(e.reduce((s, v) => s + (v - mean) ** 2, 0) / e.length);
  };
  return { x: sd(ex), y: sd(ey) };
}

/** Covers a part of the frames with an even grey: something passes in front. */
function occlude(frames: readonly Picture[], from: number, to: number): Picture[] {
  return frames.map((f, n) =>
    n >= from && n <= to ? { ...f, luma: f.luma.map((_, i) => 60 + ((i * 7919) % 5)) } : f,
  );
}

describe('follow', () => {
  // Limits: 1.5 to 2.1 times the Cramér-Rao bound of each scene, worked out from the noise-free pictures. The ball has 2.1: the
  // optics smear board and rim together, which no plate that is itself smeared can tell (0.011 px without any noise).
  it.each<[string, Partial<MovingBody> & { look: MovingBody['look']; sizePx: number }, number]>([
    ['a bullseye over a plain board', { look: 'bullseye', sizePx: 24, noiseSigma: 3 }, 0.0045],
    [
      'a bullseye over a textured board',
      { look: 'bullseye', sizePx: 24, noiseSigma: 3, background: 'textured' },
      0.006,
    ],
    [
      'a shaded ball over a textured board',
      { look: 'ball', sizePx: 30, noiseSigma: 3, background: 'textured' },
      0.03,
    ],
    [
      'a bullseye blurred over 85 % of the frame time',
      { look: 'bullseye', sizePx: 24, noiseSigma: 3, exposureS: 0.00085 },
      0.006,
    ],
  ])('finds %s to its limit', (_name, body, limitPx) => {
    const { frames, truth } = makeMovingBody({ ...falls, ...body, seed: 3 });
    const found = followFilm(
      frames,
      { xPx: truth.xPx[0], yPx: truth.yPx[0], patchPx: body.sizePx + 5 },
      search,
      (body.exposureS ?? 0) / 0.001,
    );
    expect(found.every((s) => s.state === 'measured')).toBe(true);
    const sd = scatter(found, truth);
    expect(sd.x).toBeLessThan(limitPx);
    expect(sd.y).toBeLessThan(limitPx);
  });

  it('reports the place of the point that was marked, not of the nearest whole pixel', () => {
    const { frames, truth } = makeMovingBody({
      ...falls,
      frameCount: 60,
      look: 'bullseye',
      sizePx: 24,
      noiseSigma: 1,
      seed: 2,
    });
    const [found] = followFilm(
      frames,
      { xPx: truth.xPx[0] + 0.4, yPx: truth.yPx[0] - 0.3, patchPx: 29 },
      search,
    );
    expect(found.xPx).toBeCloseTo(truth.xPx[0] + 0.4, 1);
    expect(found.yPx).toBeCloseTo(truth.yPx[0] - 0.3, 1);
  });

  it('takes a body up again after it was hidden for 12 frames, and bridges the gap', () => {
    const { frames, truth } = makeMovingBody({
      ...falls,
      look: 'bullseye',
      sizePx: 24,
      noiseSigma: 3,
      seed: 4,
    });
    const seen = followFilm(
      occlude(frames, 120, 131),
      { xPx: truth.xPx[0], yPx: truth.yPx[0], patchPx: 29 },
      search,
    );
    const found = bridgeGaps(seen);
    expect(found.slice(120, 132).map((s) => s.state)).toEqual(Array(12).fill('bridged'));
    expect(found[132].state).toBe('measured');
    // Free fall is a parabola and the bridge a cubic: it must pass within its own uncertainty of the truth, k = 4.
    for (const s of found.slice(120, 132))
      expect(Math.abs(s.yPx - truth.yPx[s.n])).toBeLessThan(4 * s.uYPx + 0.02);
  });

  it('is lost, and guesses nothing, when the body is hidden for longer than a bridge may be', () => {
    const { frames, truth } = makeMovingBody({
      ...falls,
      look: 'bullseye',
      sizePx: 24,
      noiseSigma: 3,
      seed: 4,
    });
    const found = bridgeGaps(
      followFilm(occlude(frames, 120, 160), { xPx: truth.xPx[0], yPx: truth.yPx[0], patchPx: 29 }, search),
    );
    expect(found.slice(120).every((s) => s.state === 'lost' && Number.isNaN(s.xPx))).toBe(true);
  });

  it('is lost when the body leaves the picture', () => {
    const { frames, truth } = makeMovingBody({
      ...falls,
      heightPx: 170,
      look: 'bullseye',
      sizePx: 24,
      noiseSigma: 3,
      seed: 4,
    });
    const found = bridgeGaps(
      followFilm(frames, { xPx: truth.xPx[0], yPx: truth.yPx[0], patchPx: 29 }, search),
    );
    const gone = truth.yPx.findIndex((y) => y > 170 + 12);
    expect(gone).toBeGreaterThan(0);
    expect(found.slice(gone).filter((s) => s.state !== 'lost')).toEqual([]);
  });

  it('lets a place set by hand win, and follows from there', () => {
    const { frames, truth } = makeMovingBody({
      ...falls,
      look: 'bullseye',
      sizePx: 24,
      noiseSigma: 3,
      seed: 4,
    });
    const mark = { frame: 165, xPx: truth.xPx[165], yPx: truth.yPx[165] };
    const found = followFilm(
      occlude(frames, 120, 160),
      { xPx: truth.xPx[0], yPx: truth.yPx[0], patchPx: 29, marks: [mark] },
      search,
    );
    expect(found[165]).toMatchObject({ state: 'manual', xPx: mark.xPx, yPx: mark.yPx });
    expect(found[200].state).toBe('measured');
    expect(found[200].yPx).toBeCloseTo(truth.yPx[200], 1);
  });
});
