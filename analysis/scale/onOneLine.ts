import type { PlanePoint } from './planePoint.ts';

/** Points that spread across their line by less than this share of their spread along it fix nothing across it. */
const leastSpreadShare = 0.05;

/** Spread of points across their best line as a share of that along it: 0 on a line, 1 for a square. */
function spreadShare(points: readonly PlanePoint[]): number {
  const n = points.length;
  const [mx, my] = [points.reduce((s, p) => s + p.x, 0) / n, points.reduce((s, p) => s + p.y, 0) / n];
  let [xx, xy, yy] = [0, 0, 0];
  for (const p of points) {
    xx += (p.x - mx) ** 2;
    xy += (p.x - mx) * (p.y - my);
    yy += (p.y - my) ** 2;
  }
  const half = Math.hypot((xx - yy) / 2, xy);
  const middle = (xx + yy) / 2;
  return middle > 0 ? Math.sqrt(Math.max(0, middle - half) / (middle + half)) : 0;
}

/**
 * Why a homography cannot be had from these points, in words; null where it can. All on one line, or all but one on one line: then
 * the map is not fixed off that line (Hartley & Zisserman 2004, 4.1.3).
 */
export function onOneLine(points: readonly PlanePoint[]): string | null {
  if (spreadShare(points) < leastSpreadShare) return 'all lie on one line or nearly so';
  const one = points.findIndex((_, i) => spreadShare(points.filter((__, k) => k !== i)) < leastSpreadShare);
  return one < 0 ? null : `all but one (number ${one}) lie on one line or nearly so`;
}
