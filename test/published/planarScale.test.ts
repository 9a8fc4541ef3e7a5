import { describe, expect, it } from 'vitest';
import { fitHomography, mapped } from '../../analysis/scale/homography.ts';
import { undistort } from '../../analysis/scale/undistort.ts';

/**
 * Unit square to quadrilateral in closed form: P. Heckbert, Fundamentals of Texture Mapping and Image Warping, UCB/CSD 89/516
 * (1989), section 2.2.3 (from memory): g, h from the sums of the corners, then a to f.
 */
function heckbert(corners: readonly (readonly [number, number])[]): number[] {
  const [[x0, y0], [x1, y1], [x2, y2], [x3, y3]] = corners;
  const [dx1, dx2, sx] = [x1 - x2, x3 - x2, x0 - x1 + x2 - x3];
  const [dy1, dy2, sy] = [y1 - y2, y3 - y2, y0 - y1 + y2 - y3];
  const determinant = dx1 * dy2 - dx2 * dy1;
  const g = (sx * dy2 - dx2 * sy) / determinant;
  const h = (dx1 * sy - sx * dy1) / determinant;
  return [x1 - x0 + g * x1, x3 - x0 + h * x3, x0, y1 - y0 + g * y1, y3 - y0 + h * y3, y0, g, h, 1];
}

const square = [
  [0, 0],
  [1, 0],
  [1, 1],
  [0, 1],
] as const;
const quadrilateral = [
  [112, 80],
  [530, 132],
  [488, 701],
  [64, 655],
] as const;

function fitted() {
  const fit = fitHomography(
    square.map(([x, y], i) => ({
      from: { x, y },
      to: { x: quadrilateral[i][0], y: quadrilateral[i][1] },
      u: 0.1,
    })),
  );
  if ('reason' in fit) throw new Error(fit.reason);
  return fit.h;
}

describe('planar homography', () => {
  it('is that of the closed form of four corners (Heckbert 1989)', () => {
    const h = fitted();
    heckbert(quadrilateral).forEach((value, i) => {
      // both are exact: what is left is rounding at coordinates of some hundred pixels
      expect(h[i] / h[8]).toBeCloseTo(value, 8);
    });
  });

  it('keeps the cross-ratio of four places on a line (Hartley & Zisserman 2004, 2.5)', () => {
    const h = fitted();
    const at = [0.1, 0.35, 0.6, 0.95].map((s) => mapped(h, { x: s, y: 0.2 + 0.5 * s }));
    const apart = (i: number, k: number) => Math.hypot(at[i].x - at[k].x, at[i].y - at[k].y);
    const ratio = (apart(0, 1) * apart(2, 3)) / (apart(0, 2) * apart(1, 3));
    expect(ratio).toBeCloseTo((0.25 * 0.35) / (0.5 * 0.6), 10);
  });
});

describe('radial distortion', () => {
  it('has straight lines off the middle bend towards it with barrel and away with pin-cushion (Brown 1971)', () => {
    // undistorted = distorted (1 + k1 r²): with k1 > 0 the picture was shrunk towards its corners, which is barrel distortion.
    // A line that is straight in the picture is then, in truth, farther out at its ends than in its middle.
    for (const k1 of [0.05, -0.05]) {
      const lens = { k1, k2: 0, centre: { x: 0, y: 0 }, radiusPx: 100 };
      const sagitta = undistort(80, 60, lens).yPx - undistort(0, 60, lens).yPx;
      // 60 px · k1 (1.00 - 0.36): r² is 1 at (80, 60) and 0.36 at (0, 60)
      expect(sagitta).toBeCloseTo(60 * k1 * 0.64, 10);
    }
  });
});
