import { describe, expect, it } from 'vitest';
import { calibrate } from '../../analysis/scale/calibrate.ts';
import { alongFall, atPlace, betweenPlaces } from '../../analysis/scale/displacement.ts';
import { settle } from '../../analysis/sheet/assumptions.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';
import { rigPicture, seenBy, squareRig } from './pinhole.ts';

const gMps2 = 9.81;
const timeS = Array.from({ length: 120 }, (_, i) => (0.375 * i) / 119);
const heights = timeS.map((t) => 0.35 - 0.5 * gMps2 * t * t);
const u = {
  pitchDeg: 0.5,
  yawDeg: 0.4,
  k1: 0.003,
  offsetM: 0.003,
  barM: 0.0004,
  markPx: 0.3,
  worldM: 0.0002,
};
const draws = 200;

/** Second derivative of heights by least squares on a parabola, by sums alone: times are evenly spaced. */
function accelerationOf(y: readonly number[]): number {
  const n = y.length;
  const s = timeS.map((_, i) => (2 * i) / (n - 1) - 1);
  const mean = s.reduce((sum, v) => sum + v * v, 0) / n;
  const p = s.map((v) => v * v - mean);
  const c = p.reduce((sum, v, i) => sum + v * y[i], 0) / p.reduce((sum, v) => sum + v * v, 0);
  return (2 * c) / (timeS[n - 1] / 2) ** 2;
}

/** How often g, the speed at a low place and a drop have the truth within ±1.96 u, with all errors of the rig drawn. */
function shares(
  scaleOf: (rig: typeof squareRig, random: ReturnType<typeof seededRandom>) => SheetInput['scale'],
) {
  const held = { g: 0, speed: 0, drop: 0 };
  for (let seed = 1; seed <= draws; seed++) {
    const random = seededRandom(seed);
    const error = random.gaussian;
    const rig = {
      ...squareRig,
      pitchDeg: u.pitchDeg * error(),
      yawDeg: u.yawDeg * error(),
      k1: u.k1 * error(),
    };
    const z = u.offsetM * error();
    const sheet = sheetSchema.parse({
      ...exampleSheet(),
      camera: { lens: { k1: 0, centre: rig.centre, radiusPx: rig.radiusPx, uK1: u.k1 } },
      scale: {
        planeOffsetM: 0,
        uPlaneOffsetM: u.offsetM,
        cameraDistanceM: rig.distanceM,
        uPitchDeg: u.pitchDeg,
        uYawDeg: u.yawDeg,
        ...scaleOf(rig, random),
      },
    });
    const calibration = calibrate(sheet, settle(sheet), seenBy(rig, 0.05, 0.35, z), rigPicture);
    const place = (y: number) => {
      const p = seenBy(rig, 0.05, y, z);
      return calibration.toWorld({ space: 'pixel', xPx: p.x, yPx: p.y });
    };
    const way = heights.map(place);
    const combined = (sources: readonly { uRel: number }[]) => Math.hypot(...sources.map((s) => s.uRel));
    const within = (value: number, truth: number, uRel: number) => Math.abs(value / truth - 1) <= 1.96 * uRel;
    const columns = { timeS, xM: way.map((p) => p.xM), yM: way.map((p) => p.yM) };
    const g = -accelerationOf(columns.yM);
    if (within(g, gMps2, combined(alongFall(calibration.length, columns)))) held.g++;
    const [above, low, below] = [place(-0.29), place(-0.3), place(-0.31)];
    if (within(above.yM - below.yM, 0.02, combined(atPlace(calibration.length, low)))) held.speed++;
    const top = place(0.35);
    const drop = Math.hypot(top.xM - low.xM, top.yM - low.yM);
    if (within(drop, 0.65, combined(betweenPlaces(calibration.length, top, low)))) held.drop++;
  }
  return [held.g, held.speed, held.drop].map((h) => h / draws);
}

describe('uncertainty of the scale', () => {
  it('holds g, speed and drop in 92 to 98 % of rigs whose pitch, yaw, lens, offset, bar and marks are drawn as stated', () => {
    const found = shares((rig, { gaussian }) => {
      const marked = (x: number, y: number) => {
        const p = seenBy(rig, x, y);
        return { x: p.x + u.markPx * gaussian(), y: p.y + u.markPx * gaussian() };
      };
      return {
        bars: [
          {
            a: marked(-0.1, 0.4),
            b: marked(-0.1, -0.4),
            lengthM: 0.8 + u.barM * gaussian(),
            uLengthM: u.barM,
            uMarkPx: u.markPx,
          },
        ],
      };
    });
    // 200 rigs: the share itself scatters by 1.5 %
    for (const share of found) {
      expect(share).toBeGreaterThan(0.91);
      expect(share).toBeLessThan(0.99);
    }
  }, 60_000);

  it('does so by fiducials, whose homography takes up the turn of the camera', () => {
    const found = shares((rig, { gaussian }) => ({
      fiducials: [0, 1, 2].flatMap((i) =>
        [0, 1, 2].map((j) => {
          const [x, y] = [-0.3 + 0.3 * i, -0.45 + 0.45 * j];
          const p = seenBy(rig, x, y);
          return {
            x: p.x + u.markPx * gaussian(),
            y: p.y + u.markPx * gaussian(),
            worldXM: x + u.worldM * gaussian(),
            worldYM: y + u.worldM * gaussian(),
            uMarkPx: u.markPx,
            uWorldM: u.worldM,
          };
        }),
      ),
      // the fall is in the board's own plane
      uPitchDeg: 0.001,
      uYawDeg: 0.001,
    }));
    for (const share of found) {
      expect(share).toBeGreaterThan(0.91);
      expect(share).toBeLessThan(0.995);
    }
  }, 60_000);
});
