import { describe, expect, it } from 'vitest';
import { judgeCamera, registered, shakenPlate } from '../../analysis/track/camera.ts';
import { makeShiftGauge } from '../../analysis/track/cameraShift.ts';
import { plateFrom, plateOf } from '../../analysis/track/plate.ts';
import { shiftableImage } from '../../analysis/track/shiftImage.ts';
import type { Picture } from '../../analysis/track/track.ts';
import { seededRandom } from '../../fixtures/random.ts';

const widthPx = 160;
const heightPx = 140;

/** A board of plane waves (all band-limited), seen by a camera that has moved by (dx, dy): exact by their phases. */
function board(dx: number, dy: number, noise: number, seed: number): Picture {
  const random = seededRandom(seed);
  const luma = new Uint8Array(widthPx * heightPx);
  for (let i = 0; i < luma.length; i++) {
    const x = (i % widthPx) - dx;
    const y = Math.floor(i / widthPx) - dy;
    const v =
      120 +
      30 * Math.sin((2 * Math.PI * (x + 0.3 * y)) / 17) +
      25 * Math.sin((2 * Math.PI * (y - 0.4 * x)) / 23 + 1);
    luma[i] = Math.round(v + noise * random.gaussian());
  }
  return { widthPx, heightPx, bitDepth: 8, luma };
}

describe('makeShiftGauge', () => {
  it('measures a shift to its stated uncertainty', () => {
    const gauge = makeShiftGauge(board(0, 0, 2, 1), []);
    let within = 0;
    for (let k = 0; k < 30; k++) {
      const [dx, dy] = [0.05 * k - 0.7, 0.3 - 0.03 * k];
      const shift = gauge?.(board(dx, dy, 2, 10 + k), { xPx: 0, yPx: 0 });
      if (shift && Math.hypot(shift.xPx - dx, shift.yPx - dy) < 3 * shift.uPx) within++;
      expect(shift?.uPx).toBeLessThan(0.03);
    }
    expect(within).toBeGreaterThanOrEqual(27); // 3 u in two directions: 99 %
  });

  it('is not made of an even board', () => {
    const even = { widthPx, heightPx, bitDepth: 8, luma: new Uint8Array(widthPx * heightPx).fill(90) };
    expect(makeShiftGauge(even, [])).toBeNull();
  });
});

describe('judgeCamera', () => {
  const frames = (shiftOf: (n: number) => readonly [number, number]) =>
    Array.from({ length: 20 }, (_, n) => ({ n, picture: board(...shiftOf(n), 2, n + 1) }));

  it('lets a still camera be', () => {
    expect(
      judgeCamera(
        frames(() => [0, 0]),
        [],
      ),
    ).toEqual({ kind: 'still', finding: null });
  });

  it('finds a knock of 0.8 px, and registers the frames so that the plate is sharp', () => {
    const knocked = frames((n) => (n < 11 ? [0, 0] : [0.8, -0.4]));
    const camera = judgeCamera(knocked, []);
    expect(camera).toMatchObject({ kind: 'shaken', finding: { code: 'cameraShaken' } });
    if (camera.kind !== 'shaken') return;
    const plate = plateOf(registered(knocked, camera.shifts), []);
    const truth = board(0, 0, 0, 1);
    const errors = Array.from(plate?.level ?? [], (v, i) => v - truth.luma[i]).filter((_, i) => {
      const [x, y] = [i % widthPx, Math.floor(i / widthPx)];
      return x > 4 && x < widthPx - 5 && y > 4 && y < heightPx - 5;
    });
    // Noise 2 over about 20 frames, rounding of the registered frames, and their shift known to 0.02 px at 12 levels a pixel.
    expect(Math.sqrt(errors.reduce((s, e) => s + e * e, 0) / errors.length)).toBeLessThan(0.8);
  });

  it('gives the plate up when the camera moves by more than 3 px', () => {
    expect(
      judgeCamera(
        frames((n) => [0.3 * n, 0]),
        [],
      ),
    ).toMatchObject({ kind: 'moving', finding: { code: 'cameraMoving' } });
  });
});

describe('shakenPlate', () => {
  it('shows the board as the moved camera sees it', () => {
    const still = board(0, 0, 0, 1);
    const plate = plateFrom(Float32Array.from(still.luma), widthPx, heightPx);
    const seen = shakenPlate(plate).plateAt({ xPx: 1.3, yPx: -0.6, uPx: 0.01 });
    const truth = board(1.3, -0.6, 0, 1);
    // Both are rounded to whole levels: 0.29 each, through the spline.
    for (let y = 10; y < 130; y += 7) {
      for (let x = 10; x < 150; x += 7)
        expect(Math.abs(seen.level[y * widthPx + x] - truth.luma[y * widthPx + x])).toBeLessThan(1.5);
    }
  });
});

describe('shiftableImage', () => {
  it('gives a picture back when it is not shifted, and moves it by whole pixels exactly', () => {
    const { luma } = board(0, 0, 3, 5);
    const image = shiftableImage(luma, widthPx, heightPx);
    const same = image.shifted(0, 0);
    const moved = image.shifted(2, -1);
    for (let y = 5; y < 130; y += 11) {
      for (let x = 5; x < 150; x += 11) {
        expect(same[y * widthPx + x]).toBeCloseTo(luma[y * widthPx + x], 3);
        expect(moved[y * widthPx + x]).toBeCloseTo(luma[(y + 1) * widthPx + x - 2], 3);
      }
    }
  });
});
