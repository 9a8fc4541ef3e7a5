import { leastSquares } from '../fit/leastSquares.ts';
import { unbounded } from '../fit/problem.ts';
import { differenced } from './differenced.ts';
import { farthestCornerPx, foldRadiusPx } from './lensFolds.ts';
import type { PlanePoint } from './planePoint.ts';
import { type Lens, undistort } from './undistort.ts';

/** A lens that was estimated, with the covariance of its coefficients. */
export interface EstimatedLens {
  readonly lens: Lens & { readonly uK1: number; readonly uK2: number; readonly rK1K2: number };
  /** Root mean square of what is left, along each axis or across the lines [px]. */
  readonly residualPx: number;
  readonly dof: number;
}

/** An estimate that leaves the corner uncertain by more than this share is none. */
export const leastUsefulCornerRel = 0.02;

/**
 * Radial distortion from edges that are straight in truth: the coefficients with which all of them become straight (the plumb-line
 * method of Brown, Close-range camera calibration, 1971). Least squares of the points' distances from the lines, measured in the
 * picture as it was taken (else a model that shrinks the picture would win). k2 is kept where the points show it beyond two
 * standard uncertainties.
 *
 * @param lines   for each line the places along it in the picture [px], three or more
 * @param picture its size; the lens is taken to be centred on its middle and radiusPx to be its half diagonal
 * @returns a reason in words where the lines do not say enough
 */
export function lensFromLines(
  lines: readonly (readonly PlanePoint[])[],
  picture: { readonly widthPx: number; readonly heightPx: number },
): EstimatedLens | { readonly reason: string } {
  const centre = { x: (picture.widthPx - 1) / 2, y: (picture.heightPx - 1) / 2 };
  const base = { centre, radiusPx: farthestCornerPx(centre, picture) };
  const both = fitted(lines, base, 2);
  if (!('reason' in both) && Math.abs(both.lens.k2) > 2 * both.lens.uK2) return both;
  return fitted(lines, base, 1);
}

function fitted(
  lines: readonly (readonly PlanePoint[])[],
  base: Pick<Lens, 'centre' | 'radiusPx'>,
  order: 1 | 2,
): EstimatedLens | { reason: string } {
  const points = lines.reduce((s, line) => s + line.length, 0);
  const dof = points - 2 * lines.length - order;
  if (dof < 1) return { reason: 'they have too few points: give three or more lines with five points each' };
  // The parameters are 1 + k: whether a step still counts is judged by the parameter, and k may be next to nothing.
  const lensBy = (p: Float64Array): Lens => ({ ...base, k1: p[0] - 1, k2: order === 2 ? p[1] - 1 : 0 });
  const residuals = (p: Float64Array) => Float64Array.from(lines.flatMap((line) => offLine(line, lensBy(p))));
  const solved = leastSquares({
    start: new Float64Array(order).fill(1),
    bounds: unbounded(order),
    residuals,
    linearised: (p) => differenced(residuals, p),
  });
  if ('reason' in solved) return solved;
  const { parameters, covariance, chiSquared } = solved;
  const variance = chiSquared / dof;
  const uK1 = Math.sqrt(variance * covariance[0][0]);
  const uK2 = order === 2 ? Math.sqrt(variance * covariance[1][1]) : 0;
  const r = order === 2 ? covariance[0][1] / Math.sqrt(covariance[0][0] * covariance[1][1]) : 0;
  if (!(Math.sqrt(uK1 ** 2 + uK2 ** 2 + 2 * r * uK1 * uK2) < leastUsefulCornerRel)) {
    return {
      reason:
        'they leave the distortion open: lines through the middle of the picture show none; mark long edges near its sides',
    };
  }
  const lens = { ...lensBy(parameters), uK1, uK2, rK1K2: r };
  const fold = foldRadiusPx(lens);
  if (fold !== null && fold <= base.radiusPx)
    return { reason: 'they give a lens model that folds the picture' };
  return { lens, residualPx: Math.sqrt(variance), dof };
}

/** Distances of the points from their best line, as they are in the picture as it was taken [px]. */
function offLine(line: readonly PlanePoint[], lens: Lens): number[] {
  const flat = line.map((p) => undistort(p.x, p.y, lens));
  const n = flat.length;
  const [mx, my] = [flat.reduce((s, p) => s + p.xPx, 0) / n, flat.reduce((s, p) => s + p.yPx, 0) / n];
  let [xx, xy, yy] = [0, 0, 0];
  for (const { xPx, yPx } of flat) {
    xx += (xPx - mx) ** 2;
    xy += (xPx - mx) * (yPx - my);
    yy += (yPx - my) ** 2;
  }
  const along = 0.5 * Math.atan2(2 * xy, xx - yy);
  const [nx, ny] = [-Math.sin(along), Math.cos(along)];
  return flat.map(({ xPx, yPx }, i) => {
    // The lens's own stretch across the line at this place (Sampson's distance): J n for J = f I + f' d dᵀ
    const [dx, dy] = [line[i].x - lens.centre.x, line[i].y - lens.centre.y];
    const s = (dx * dx + dy * dy) / lens.radiusPx ** 2;
    const f = 1 + lens.k1 * s + lens.k2 * s * s;
    const radial = ((2 * lens.k1 + 4 * lens.k2 * s) * (dx * nx + dy * ny)) / lens.radiusPx ** 2;
    return ((xPx - mx) * nx + (yPx - my) * ny) / Math.hypot(f * nx + radial * dx, f * ny + radial * dy);
  });
}
