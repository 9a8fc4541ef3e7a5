import type { PlanePoint } from './planePoint.ts';
import type { Lens } from './undistort.ts';

/**
 * Where the lens shows a place of the undistorted picture: the inverse of `undistort`, by Newton's method on the radius.
 *
 * @throws RangeError if the model folds before it gets there
 */
export function distort(flat: PlanePoint, lens: Lens): PlanePoint {
  const [dx, dy] = [flat.x - lens.centre.x, flat.y - lens.centre.y];
  const wanted = Math.hypot(dx, dy) / lens.radiusPx;
  if (wanted === 0) return flat;
  let r = wanted;
  for (let step = 0; step < 50; step++) {
    const s = r * r;
    const slope = 1 + 3 * lens.k1 * s + 5 * lens.k2 * s * s;
    if (!(slope > 0)) throw new RangeError('distort: the lens model folds before this place');
    const change = (r * (1 + lens.k1 * s + lens.k2 * s * s) - wanted) / slope;
    r -= change;
    if (Math.abs(change) < 1e-14) break;
  }
  return { x: lens.centre.x + (dx * r) / wanted, y: lens.centre.y + (dy * r) / wanted };
}
