import { describe, expect, it } from 'vitest';
import { lensProblem } from '../../analysis/scale/scaleProblems.ts';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';

function stops(change: (sheet: SheetInput) => void): string[] {
  const sheet = exampleSheet();
  change(sheet);
  return checkSheet(sheetSchema.parse(sheet))
    .filter((f) => f.level === 'stop')
    .map((f) => f.text);
}
const fiducial = (x: number, y: number) => ({ x: 100 + 500 * x, y: 700 - 500 * y, worldXM: x, worldYM: y });

describe('a sheet whose scale cannot be', () => {
  it('is refused where fiducials lie on one line, or nearly', () => {
    for (const aside of [0, 0.003]) {
      const [line] = stops((s) => {
        s.scale = { fiducials: [0, 0.2, 0.5, 0.9].map((y, i) => fiducial(i % 2 === 0 ? aside : 0, y)) };
      });
      expect(line).toBe(
        'scale.fiducials: no scale can be had from them, for all lie on one line or nearly so; state four or more that span the fall in width and height.',
      );
    }
  });

  it('is refused where all fiducials but one lie on one line', () => {
    const [line] = stops((s) => {
      s.scale = { fiducials: [fiducial(0, 0), fiducial(0, 0.4), fiducial(0, 0.9), fiducial(0.5, 0.4)] };
    });
    expect(line).toContain('all but one (number 3) lie on one line');
  });

  it('is refused with three fiducials and no bar', () => {
    const lines = stops((s) => {
      s.scale = { fiducials: [fiducial(0, 0), fiducial(0, 1), fiducial(1, 0)] };
    });
    expect(lines.join('\n')).toContain('3 stated, but four or more are needed');
  });

  it('is refused where pitch is to come from a fall with unknown drag or from an unknown distance', () => {
    const lines = stops((s) => {
      s.scale = { bars: s.scale.bars, pitchFromFall: true };
      s.bodies = [{ id: 'ball', role: 'reference', x: 1, y: 1 }];
      delete s.tether;
      delete s.limits;
    });
    expect(lines).toHaveLength(2);
    expect(lines[0]).toContain('the drag must be known; state diameterM and massKg');
    expect(lines[1]).toContain('needs scale.cameraDistanceM');
    const [twice] = stops((s) => Object.assign(s.scale, { pitchFromFall: true }));
    expect(twice).toContain('leave one of them out');
  });

  it('is refused where a straight line has fewer than three points', () => {
    const sheet = exampleSheet();
    sheet.camera = {
      straightLines: [
        [
          { x: 1, y: 2 },
          { x: 3, y: 4 },
        ],
      ],
    };
    const parsed = parseSheet(sheet);
    expect(parsed.ok ? [] : parsed.problems[0]).toContain('camera.straightLines[0]');
  });
});

describe('lensProblem', () => {
  const withLens = (k1: number, k2: number) => {
    const sheet = exampleSheet();
    sheet.camera = { lens: { k1, k2, centre: { x: 319.5, y: 399.5 }, radiusPx: 512 } };
    return lensProblem(sheetSchema.parse(sheet), { widthPx: 640, heightPx: 800 });
  };

  it('refuses a lens whose model turns back inside the picture, and says where', () => {
    // r (1 + k1 r²) is greatest at r = 1/√(-3 k1): for k1 = -1/3 at the reference radius itself, 512 px; the corner is 512.2 px off.
    expect(withLens(-1 / 3, 0)?.text).toContain('512 px from its centre, inside the picture');
    expect(withLens(-0.3, 0)).toBeNull();
    // 1 + 3 k1 s + 5 k2 s² with k1 = 0.1, k2 = -0.3: its root is s = (0.3 + √(0.09 + 6))/3 = 0.9226, r = 0.9605 · 512 px
    expect(withLens(0.1, -0.3)?.text).toContain('492 px');
  });

  it('has nothing against a barrel or a pin-cushion of a few percent', () => {
    expect(withLens(0.05, -0.01)).toBeNull();
    expect(withLens(-0.05, 0.01)).toBeNull();
  });
});
