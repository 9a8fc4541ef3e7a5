import { describe, expect, it } from 'vitest';
import { distort } from '../../analysis/scale/distort.ts';
import { lensFromLines } from '../../analysis/scale/lensFromLines.ts';
import { lensFromTargets } from '../../analysis/scale/lensFromTargets.ts';
import { seenTarget } from '../../analysis/scale/target/seenTarget.ts';
import { undistort } from '../../analysis/scale/undistort.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { lightOf, photo, type Scene } from './madeTargets.ts';
import { rigPicture, seenBy, squareRig } from './pinhole.ts';

const rig = { ...squareRig, k1: -0.012, k2: 0.004 };
const random = seededRandom(7);

/** Points along straight lines of the plane as the rig sees them, with noise. */
function seenLines(truth: typeof rig, noisePx: number) {
  const ends = [
    [-0.37, 0.6, -0.35, -0.6],
    [0.37, 0.6, 0.36, -0.6],
    [-0.38, 0.58, 0.38, 0.6],
    [-0.38, -0.6, 0.38, -0.58],
    [-0.2, 0.6, -0.25, -0.6],
    [-0.38, 0.3, 0.38, -0.3],
  ];
  return ends.map(([x0, y0, x1, y1]) =>
    Array.from({ length: 25 }, (_, i) => {
      const at = seenBy(truth, x0 + ((x1 - x0) * i) / 24, y0 + ((y1 - y0) * i) / 24);
      return { x: at.x + noisePx * random.gaussian(), y: at.y + noisePx * random.gaussian() };
    }),
  );
}

describe('lensFromLines', () => {
  it('finds the lens of straight lines without noise', () => {
    const found = lensFromLines(seenLines(rig, 0), rigPicture);
    if ('reason' in found) throw new Error(found.reason);
    // the picture's half diagonal reaches half a pixel farther than the truth's radius
    const scale = (found.lens.radiusPx / rig.radiusPx) ** 2;
    expect(found.lens.k1).toBeCloseTo(rig.k1 * scale, 6);
    expect(found.lens.k2).toBeCloseTo(rig.k2 * scale * scale, 6);
  });

  it('does not care how the plane is turned against the camera', () => {
    const turned = { ...rig, pitchDeg: 12, yawDeg: -8, rollDeg: 30 };
    const found = lensFromLines(seenLines(turned, 0), rigPicture);
    if ('reason' in found) throw new Error(found.reason);
    expect(found.lens.k1).toBeCloseTo(rig.k1, 4);
  });

  it('has the truth within its 95 % interval in 92 to 98 % of draws', () => {
    const k1Only = { ...rig, k2: 0 };
    let held = 0;
    const draws = 200;
    for (let i = 0; i < draws; i++) {
      const found = lensFromLines(seenLines(k1Only, 0.1), rigPicture);
      if ('reason' in found) throw new Error(found.reason);
      const { k1, k2, uK1, uK2, rK1K2 } = found.lens;
      // What counts is the shift at the corner, k1 + k2, however it is shared between them.
      const u = Math.sqrt(uK1 ** 2 + uK2 ** 2 + 2 * rK1K2 * uK1 * uK2);
      if (Math.abs(k1 + k2 - k1Only.k1) <= 1.96 * u) held++;
    }
    // 200 draws scatter by 1.5 %
    expect(held / draws).toBeGreaterThan(0.905);
    expect(held / draws).toBeLessThan(0.99);
  });

  it('says so where the lines show nothing: through the middle, or too few points', () => {
    const through = [0.1, 0.9, 2].map((a) =>
      Array.from({ length: 20 }, (_, i) => ({
        x: 319.5 + (i - 9.5) * 20 * Math.cos(a) + 0.2 * random.gaussian(),
        y: 511.5 + (i - 9.5) * 20 * Math.sin(a) + 0.2 * random.gaussian(),
      })),
    );
    expect(lensFromLines(through, rigPicture)).toMatchObject({
      reason: expect.stringContaining('leave the distortion open'),
    });
    const three = [
      [
        { x: 1, y: 1 },
        { x: 1, y: 200 },
        { x: 2, y: 400 },
      ],
    ];
    expect(lensFromLines(three, rigPicture)).toMatchObject({
      reason: expect.stringContaining('too few points'),
    });
  });
});

describe('distort', () => {
  it('undoes undistort', () => {
    const lens = { k1: 0.05, k2: -0.01, centre: { x: 300, y: 500 }, radiusPx: 600 };
    for (const [x, y] of [
      [10, 20],
      [300, 500],
      [630, 1000],
    ]) {
      const flat = undistort(x, y, lens);
      const back = distort({ x: flat.xPx, y: flat.yPx }, lens);
      expect(back.x).toBeCloseTo(x, 9);
      expect(back.y).toBeCloseTo(y, 9);
    }
  });

  it('refuses a place beyond the fold', () => {
    const lens = { k1: -0.5, k2: 0, centre: { x: 0, y: 0 }, radiusPx: 100 };
    expect(() => distort({ x: 90, y: 0 }, lens)).toThrow(RangeError);
  });
});

describe('lensFromTargets', () => {
  const views = [
    { pitchDeg: 0, yawDeg: 0 },
    { pitchDeg: 15, yawDeg: 5 },
    { pitchDeg: -5, yawDeg: -15 },
  ];
  const gridOf = (turn: (typeof views)[number], noisePx: number) =>
    Array.from({ length: 77 }, (_, i) => {
      const [column, row] = [i % 7, Math.floor(i / 7)];
      const at = seenBy({ ...rig, ...turn }, (column - 3) * 0.115, (row - 5) * 0.11);
      return { column, row, x: at.x + noisePx * random.gaussian(), y: at.y + noisePx * random.gaussian() };
    });

  it('finds the lens of exact points, from one picture or several, centre and all', () => {
    for (const turns of [views.slice(0, 1), views]) {
      for (const free of [false, true]) {
        const found = lensFromTargets(
          turns.map((turn) => gridOf(turn, 0)),
          rigPicture,
          free,
        );
        if ('reason' in found) throw new Error(found.reason);
        expect(found.lens.k1).toBeCloseTo(rig.k1, 4);
        expect(found.lens.k2).toBeCloseTo(rig.k2, 4);
        expect(found.lens.centre.x).toBeCloseTo(319.5, 2);
        expect(found.lens.centre.y).toBeCloseTo(511.5, 2);
      }
    }
  });

  it('has the shift at the corner within its 95 % interval in 92 to 98 % of draws', () => {
    let held = 0;
    const draws = 60;
    for (let i = 0; i < draws; i++) {
      const found = lensFromTargets([gridOf(views[1], 0.05)], rigPicture, false);
      if ('reason' in found) throw new Error(found.reason);
      const { k1, k2, uK1, uK2, rK1K2 } = found.lens;
      if (
        Math.abs(k1 + k2 - rig.k1 - rig.k2) <=
        1.96 * Math.sqrt(uK1 ** 2 + uK2 ** 2 + 2 * rK1K2 * uK1 * uK2)
      )
        held++;
    }
    // 60 draws scatter by 2.8 %
    expect(held / draws).toBeGreaterThan(0.87);
  }, 60_000);
});

describe('seenTarget', () => {
  const [widthPx, heightPx] = [240, 200];
  const small = {
    ...squareRig,
    pxPerM: 250,
    centre: { x: 119.5, y: 99.5 },
    radiusPx: 156,
    k1: 0.02,
    k2: 0,
    pitchDeg: 10,
    yawDeg: -8,
  };
  const places = Array.from({ length: 30 }, (_, i) => {
    const [column, row] = [i % 6, Math.floor(i / 6)];
    return { column, row, at: seenBy(small, (column - 2.5) * 0.13, (row - 2) * 0.13) };
  });

  it('finds dots to 0.05 px and their rows and columns; the lens follows', () => {
    const scene: Scene = (x, y, side) => {
      let light = 210;
      for (const { at } of places) {
        if (Math.abs(x - at.x) > 8 || Math.abs(y - at.y) > 8) continue;
        const inside = 7 - Math.hypot(x - at.x, y - at.y);
        if (inside > -side) light -= 170 * Math.min(1, Math.max(0, 0.5 + inside / side));
      }
      return light;
    };
    const picture = photo(lightOf(scene, widthPx, heightPx, 0.7), widthPx, heightPx, 2, 3);
    const grid = seenTarget(picture, { kind: 'dots', columns: 6, rows: 5 });
    if ('reason' in grid) throw new Error(grid.reason);
    expect(grid).toHaveLength(30);
    for (const p of grid) {
      const nearest = Math.min(...places.map(({ at }) => Math.hypot(at.x - p.x, at.y - p.y)));
      expect(nearest).toBeLessThan(0.05);
    }
    const found = lensFromTargets([grid], { widthPx, heightPx }, false);
    if ('reason' in found) throw new Error(found.reason);
    const { k1, k2, uK1, uK2, rK1K2 } = found.lens;
    expect(Math.abs(k1 + k2 - 0.02)).toBeLessThan(3 * Math.sqrt(uK1 ** 2 + uK2 ** 2 + 2 * rK1K2 * uK1 * uK2));
    expect(seenTarget(picture, { kind: 'dots', columns: 5, rows: 5 })).toEqual({
      reason: '6 × 5 dots are seen, more than the 5 × 5 that are stated',
    });
  }, 30_000);

  it('finds the inner corners of a chessboard', () => {
    const pitch = 30;
    const scene: Scene = (x, y, side) => {
      const turn = 0.12;
      const [u, v] = [
        (x - 31) * Math.cos(turn) + (y - 12) * Math.sin(turn),
        (y - 12) * Math.cos(turn) - (x - 31) * Math.sin(turn),
      ];
      if (u < 0 || v < 0 || u > 6 * pitch || v > 5 * pitch) return 210;
      const stripes = (w: number) => {
        const away = w / pitch - Math.round(w / pitch);
        const sign = Math.round(w / pitch) % 2 === 0 ? 1 : -1;
        return sign * Math.min(1, Math.max(-1, (2 * away * pitch) / side));
      };
      return 125 + 85 * stripes(u) * stripes(v);
    };
    const picture = photo(lightOf(scene, widthPx, heightPx, 0.7), widthPx, heightPx, 2, 4);
    const grid = seenTarget(picture, { kind: 'squares', columns: 5, rows: 4 });
    if ('reason' in grid) throw new Error(grid.reason);
    expect(grid).toHaveLength(20);
    for (const p of grid) {
      const [c, s] = [Math.cos(0.12), Math.sin(0.12)];
      const [u, v] = [(p.x - 31) * c + (p.y - 12) * s, (p.y - 12) * c - (p.x - 31) * s];
      expect(Math.abs(u - pitch * Math.round(u / pitch))).toBeLessThan(0.05);
      expect(Math.abs(v - pitch * Math.round(v / pitch))).toBeLessThan(0.05);
    }
  }, 30_000);

  it('says so where there is no target', () => {
    const empty = photo(new Float64Array(widthPx * heightPx).fill(120), widthPx, heightPx, 2, 5);
    expect(seenTarget(empty, { kind: 'dots', columns: 6, rows: 5 })).toMatchObject({
      reason: expect.stringMatching(/^only 0 of 30 dots/),
    });
  });
});
