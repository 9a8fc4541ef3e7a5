import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { calibrate } from '../../analysis/scale/calibrate.ts';
import { undistort } from '../../analysis/scale/undistort.ts';
import { settle } from '../../analysis/sheet/assumptions.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';

function calibrated(change: (sheet: SheetInput) => void = () => {}) {
  const sheet = exampleSheet();
  change(sheet);
  const parsed = sheetSchema.parse(sheet);
  return calibrate(parsed, settle(parsed), { x: 100, y: 200 }, { widthPx: 640, heightPx: 800 });
}
const at = (xPx: number, yPx: number) => ({ space: 'pixel', xPx, yPx }) as const;

describe('calibrate', () => {
  it('takes metres per pixel from the bar', () => {
    const { metrePerPx } = calibrated();
    expect(metrePerPx).toBeCloseTo(0.7 / Math.hypot(0.2, 701.3), 12);
  });

  it('states length and marks of the bar as separate relative uncertainties', () => {
    const { length } = calibrated();
    const of = (source: string) => length.find((l) => l.source === source)?.uRel;
    expect(of('scale bar length')).toBeCloseTo(0.0005 / 0.7, 12);
    expect(of('scale bar marks')).toBeCloseTo((Math.SQRT2 * 0.3) / 701.3, 6);
    expect(of('plane offset')).toBeCloseTo(0.002 / 3, 12);
  });

  it('turns the world so that the plumb line is vertical, y up', () => {
    // Plumb line leaning by atan(1/10): a point further down along it must have the same x and a smaller y.
    const { toWorld } = calibrated((s) =>
      Object.assign(s.scale, { plumb: { a: { x: 10, y: 0 }, b: { x: 60, y: 500 } } }),
    );
    const below = toWorld(at(100 + 10, 200 + 100));
    expect(below.xM).toBeCloseTo(0, 12);
    expect(below.yM).toBeLessThan(0);
  });

  it('agrees with itself whichever end of the plumb line was marked first', () => {
    const a = calibrated((s) =>
      Object.assign(s.scale, { plumb: { a: { x: 10, y: 0 }, b: { x: 60, y: 500 } } }),
    );
    const b = calibrated((s) =>
      Object.assign(s.scale, { plumb: { b: { x: 10, y: 0 }, a: { x: 60, y: 500 } } }),
    );
    expect(a.downRad).toBe(b.downRad);
  });

  it('makes a body in front of the bar smaller by the ratio of the distances', () => {
    const inPlane = calibrated();
    const inFront = calibrated((s) => Object.assign(s.scale, { planeOffsetM: 0.03 }));
    expect(inFront.metrePerPx / inPlane.metrePerPx).toBeCloseTo((3 - 0.03) / 3, 12);
  });

  it('says when two bars disagree, and widens the uncertainty by it', () => {
    const two = calibrated((s) =>
      s.scale.bars?.push({
        a: { x: 500, y: 40 },
        b: { x: 500, y: 741 },
        lengthM: 0.71,
        uLengthM: 0.0005,
        uMarkPx: 0.3,
      }),
    );
    expect(two.findings.map((f) => f.code)).toContain('barsDisagree');
    expect(two.length.map((l) => l.source)).toContain('disagreement of bars');
  });

  it('recovers scale and turn of four fiducials from an exact similarity', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -0.5, max: 0.5, noNaN: true }),
        fc.double({ min: 100, max: 1000, noNaN: true }),
        (turn, pxPerM) => {
          // World (X, Y up) drawn into the picture turned by `turn`: truth is built here, forwards.
          const corners = [
            [0, 0],
            [0.5, 0],
            [0.5, 0.8],
            [0, 0.8],
          ];
          const fiducials = corners.map(([X, Y]) => ({
            x: 50 + pxPerM * (X * Math.cos(turn) + Y * Math.sin(turn)),
            y: 900 - pxPerM * (Y * Math.cos(turn) - X * Math.sin(turn)),
            worldXM: X,
            worldYM: Y,
          }));
          const c = calibrated((s) => {
            s.scale = { bars: [], fiducials };
          });
          const p = c.toWorld(at(100 + pxPerM * Math.sin(turn), 200 - pxPerM * Math.cos(turn)));
          expect(c.metrePerPx * pxPerM).toBeCloseTo(1, 9);
          expect(p.xM).toBeCloseTo(0, 9);
          expect(p.yM).toBeCloseTo(1, 9);
        },
      ),
    );
  });
});

describe('undistort', () => {
  it('follows the stated radial model (Brown 1971): a point at the reference radius moves out by k1 + k2', () => {
    const lens = { k1: 0.02, k2: -0.005, centre: { x: 320, y: 240 }, radiusPx: 400 };
    expect(undistort(720, 240, lens).xPx).toBeCloseTo(320 + 400 * 1.015, 10);
  });

  it('leaves the picture alone without a lens', () => {
    expect(undistort(12.5, 7.25, undefined)).toEqual({ xPx: 12.5, yPx: 7.25 });
  });
});
