import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { calibrate } from '../../analysis/scale/calibrate.ts';
import { alongFall, atPlace, betweenPlaces } from '../../analysis/scale/displacement.ts';
import { settle } from '../../analysis/sheet/assumptions.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';
import { rigPicture, seenBy, squareRig, type TrueRig } from './pinhole.ts';

/** Calibration of a rig whose sheet states its true turn, lens and distance; the scale comes from what `scale` gives. */
function calibrated(
  rig: TrueRig,
  scale: SheetInput['scale'],
  lens: Partial<{ uK1: number; uK2: number }> = { uK1: 1e-6 },
) {
  const sheet: SheetInput = {
    ...exampleSheet(),
    camera: {
      exposureS: 0,
      lens: { k1: rig.k1, k2: rig.k2, centre: rig.centre, radiusPx: rig.radiusPx, ...lens },
    },
    scale: {
      plumb: { a: seenBy(rig, 0, 0.5), b: seenBy(rig, 0, -0.5) },
      planeOffsetM: 0,
      uPlaneOffsetM: 0.001,
      cameraDistanceM: rig.distanceM,
      pitchDeg: rig.pitchDeg,
      yawDeg: rig.yawDeg,
      uPitchDeg: 0.1,
      uYawDeg: 0.1,
      ...scale,
    },
  };
  const parsed = sheetSchema.parse(sheet);
  return calibrate(parsed, settle(parsed), seenBy(rig, 0.05, 0.4), rigPicture);
}
const barOf = (rig: TrueRig) => ({
  bars: [
    { a: seenBy(rig, -0.2, 0.45), b: seenBy(rig, -0.2, -0.45), lengthM: 0.9, uLengthM: 0.0002, uMarkPx: 0.1 },
  ],
});
const at = (p: { x: number; y: number }) => ({ space: 'pixel', xPx: p.x, yPx: p.y }) as const;

const grid = [0, 1, 2].flatMap((i) =>
  [0, 1, 2, 3].map((j) => ({ x: -0.3 + 0.3 * i, y: -0.5 + (1 / 3) * j })),
);
const fiducialsOf = (rig: TrueRig) => ({
  bars: [],
  // the board's own coordinates, from its lower left corner
  fiducials: grid.map((g) => ({
    ...seenBy(rig, g.x, g.y),
    worldXM: g.x + 0.3,
    worldYM: g.y + 0.5,
    uMarkPx: 0.05,
    uWorldM: 0.0001,
  })),
});

const anyRig = fc.record({
  pitchDeg: fc.double({ min: -5, max: 5, noNaN: true }),
  yawDeg: fc.double({ min: -5, max: 5, noNaN: true }),
  rollDeg: fc.double({ min: -10, max: 10, noNaN: true }),
  k1: fc.double({ min: -0.02, max: 0.02, noNaN: true }),
  k2: fc.double({ min: -0.004, max: 0.004, noNaN: true }),
  distanceM: fc.double({ min: 1, max: 5, noNaN: true }),
});

describe('calibrate, of a turned camera with a lens', () => {
  it('gives true places by a bar, whatever the stated turn, roll and lens', () => {
    fc.assert(
      fc.property(anyRig, (change) => {
        const rig = { ...squareRig, ...change };
        const { toWorld } = calibrated(rig, barOf(rig));
        for (const [x, y] of [
          [0.05, 0.4],
          [0.05, -0.4],
          [-0.3, 0],
          [0.3, -0.5],
        ]) {
          const found = toWorld(at(seenBy(rig, x, y)));
          // A vertical line seen turned about both axes leans in the picture by the product of both turns (to 8 mrad): 1 µm in
          // the height, and sideways what the plumb line at another place than the bar takes up.
          expect(found.yM).toBeCloseTo(y - 0.4, 4);
          expect(found.xM).toBeCloseTo(x - 0.05, 2);
        }
      }),
      { numRuns: 60 },
    );
  });

  it('gives true places by fiducials without being told the turn', () => {
    fc.assert(
      fc.property(anyRig, (change) => {
        const rig = { ...squareRig, ...change };
        const { toWorld } = calibrated(rig, { ...fiducialsOf(rig), pitchDeg: 0, yawDeg: 0 });
        for (const [x, y] of [
          [0.05, 0.4],
          [0.05, -0.4],
          [-0.3, 0],
          [0.3, -0.5],
        ]) {
          const found = toWorld(at(seenBy(rig, x, y)));
          expect(found.xM).toBeCloseTo(x - 0.05, 7);
          expect(found.yM).toBeCloseTo(y - 0.4, 7);
        }
      }),
      { numRuns: 60 },
    );
  });

  it('sees a body in front of the plane at its true size, by bar and by fiducials', () => {
    const rig = { ...squareRig, pitchDeg: 2 };
    for (const scale of [barOf(rig), { ...fiducialsOf(rig), pitchDeg: 0 }]) {
      const { toWorld } = calibrated(rig, { ...scale, planeOffsetM: 0.05 });
      const [a, b] = [toWorld(at(seenBy(rig, 0, 0.4, 0.05))), toWorld(at(seenBy(rig, 0, -0.4, 0.05)))];
      // D is along the axis, the offset at right angles to the plane: cos 2° of 0.05/2 is left, 15 ppm of the length
      expect((a.yM - b.yM) / 0.8).toBeCloseTo(1, 4);
    }
  });

  it('keeps all lengths when the whole picture is shifted, turned or scaled', () => {
    const rig = { ...squareRig, yawDeg: 1, pitchDeg: -1 };
    const base = calibrated(rig, { ...fiducialsOf(rig), pitchDeg: 0, yawDeg: 0 });
    const turned = (p: { x: number; y: number }) => ({
      x: 300 + 1.7 * (0.6 * p.x - 0.8 * p.y),
      y: -90 + 1.7 * (0.8 * p.x + 0.6 * p.y),
    });
    const other = fiducialsOf(rig);
    const parsed = sheetSchema.parse({
      ...exampleSheet(),
      camera: { lens: { k1: 0, centre: { x: 0, y: 0 }, radiusPx: 1 } },
      scale: {
        fiducials: other.fiducials.map((f) => ({ ...f, ...turned(f) })),
        cameraDistanceM: 2,
      },
    });
    const moved = calibrate(parsed, settle(parsed), turned(seenBy(rig, 0.05, 0.4)), rigPicture);
    for (const [x, y] of [
      [0.2, 0.1],
      [-0.1, -0.45],
    ]) {
      const [p, q] = [base.toWorld(at(seenBy(rig, x, y))), moved.toWorld(at(turned(seenBy(rig, x, y))))];
      expect(Math.hypot(q.xM, q.yM)).toBeCloseTo(Math.hypot(p.xM, p.yM), 8);
    }
  });
});

describe('what errors of the rig make of a value', () => {
  const fallS = Math.sqrt((2 * 0.7) / 9.81);
  const fall = {
    timeS: Array.from({ length: 600 }, (_, i) => (fallS * i) / 599),
    xM: new Array<number>(600).fill(0),
    yM: Array.from({ length: 600 }, (_, i) => -0.5 * 9.81 * ((fallS * i) / 599) ** 2),
  };
  const of = (sources: readonly { source: string; uRel: number }[], source: string) =>
    sources.find((s) => s.source === source)?.uRel ?? Number.NaN;

  it('has 1° of pitch at 2 m change g by 0.43 %, over a fall of 0.7 m', () => {
    // Shared limits, section C: 0.43 % per degree at 2 m, 0.22 % for half a degree; double at 1 m.
    for (const [distanceM, uPitchDeg, expected] of [
      [2, 1, 0.0043],
      [2, 0.5, 0.0022],
      [1, 0.5, 0.0043],
    ]) {
      const rig = { ...squareRig, distanceM };
      const { length } = calibrated(rig, {
        bars: [
          { a: seenBy(rig, 0, 0.4), b: seenBy(rig, 0, -0.3), lengthM: 0.7, uLengthM: 0.0002, uMarkPx: 0.1 },
        ],
        uPitchDeg,
      });
      // stated to two digits; 1° has a second order of 1 %
      expect(Math.abs(of(alongFall(length, fall), 'camera pitch') / expected - 1)).toBeLessThan(0.03);
    }
  });

  it('has 0.5 % of distortion at the ends of a fall change g by 0.58 %, the bar over the full height', () => {
    // Shared limits, section C. The ends are at 0.35 m: 280 px of the 1024 px high picture, so k1 is 0.5 % there.
    const rig = { ...squareRig, centre: { x: 319.5, y: 511.5 }, radiusPx: 280 };
    const { length } = calibrated(
      rig,
      {
        bars: [
          { a: seenBy(rig, 0, 0.35), b: seenBy(rig, 0, -0.35), lengthM: 0.7, uLengthM: 0.0002, uMarkPx: 0.1 },
        ],
      },
      { uK1: 0.005 },
    );
    // the origin of the world is 0.05 m above the upper end of the bar
    const centred = { ...fall, xM: fall.xM.map(() => -0.05), yM: fall.yM.map((y) => y - 0.05) };
    expect(of(alongFall(length, centred), 'lens')).toBeCloseTo(0.0058, 3.3); // sampled at other instants: to 5 %
  });

  it('makes no difference between fall, place and distance for an error that stretches all alike', () => {
    const { length } = calibrated(squareRig, barOf(squareRig));
    const stretched = [
      {
        source: 'all',
        uRel: 1,
        moves: [(p: { xM: number; yM: number }) => ({ xM: 1.01 * p.xM, yM: 1.01 * p.yM })],
      },
    ];
    expect(of(alongFall(stretched, fall), 'all')).toBeCloseTo(0.01, 9);
    expect(of(atPlace(stretched, { xM: 0.3, yM: -0.2 }), 'all')).toBeCloseTo(0.01, 9);
    expect(of(betweenPlaces(stretched, { xM: 0.3, yM: -0.2 }, { xM: 0, yM: -0.7 }), 'all')).toBeCloseTo(
      0.01,
      9,
    );
    expect(of(alongFall(length, fall), 'scale bar length')).toBe(of(length, 'scale bar length'));
  });

  it('has a local scale that grows along a pitched fall as the camera comes nearer', () => {
    // Depth changes by sin 0.1° per metre: between two places 0.5 m apart the local scale differs by 2 · 0.5 · 0.1°/2 m.
    const { length } = calibrated(squareRig, barOf(squareRig));
    const pitch = length.filter((s) => s.source === 'camera pitch');
    const [up, low] = [
      atPlace(pitch, { xM: 0, yM: -0.4 + 0.25 }),
      atPlace(pitch, { xM: 0, yM: -0.4 - 0.25 }),
    ];
    const perRad = (0.1 * Math.PI) / 180;
    expect(of(up, 'camera pitch') + of(low, 'camera pitch')).toBeCloseTo((2 * 0.5 * perRad) / 2, 6);
  });
});
