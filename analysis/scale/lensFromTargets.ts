import { leastSquares } from '../fit/leastSquares.ts';
import { unbounded } from '../fit/problem.ts';
import { differenced } from './differenced.ts';
import { distort } from './distort.ts';
import { fitHomography, mapped } from './homography.ts';
import { farthestCornerPx, foldRadiusPx } from './lensFolds.ts';
import { type EstimatedLens, leastUsefulCornerRel } from './lensFromLines.ts';
import type { GridPoint } from './target/orderGrid.ts';

/** Larger than any parameter, so that a step of the fit counts against 1 also where one is next to nothing. */
const away = 10;
/** A coefficient beyond this is no lens for rig footage; the fit is kept within. */
const largestK = 0.5;

/**
 * Radial lens from pictures of a flat regular target: one homography for each picture and the lens common to all, by least squares
 * of the distances in the picture as taken (Zhang 2000 without the camera's inside, which a planar scale does not need; the lens
 * after Brown 1971). One picture is enough where the target fills it; several from different sides are better.
 *
 * @param views   the points of the target in each picture
 * @param picture its size; radiusPx is its half diagonal
 * @param freeCentre  whether the lens's centre is sought too; else it is the picture's middle
 * @returns a reason in words where the pictures do not say enough
 */
export function lensFromTargets(
  views: readonly (readonly GridPoint[])[],
  picture: { readonly widthPx: number; readonly heightPx: number },
  freeCentre: boolean,
): EstimatedLens | { readonly reason: string } {
  const middle = { x: (picture.widthPx - 1) / 2, y: (picture.heightPx - 1) / 2 };
  const radiusPx = farthestCornerPx(middle, picture);
  // Columns and rows, and pixels, both brought to about one.
  const worlds = views.map((view) => view.map((p) => ({ x: p.column / 10, y: p.row / 10 })));
  const starts: number[][] = [];
  for (const [v, view] of views.entries()) {
    const fit = fitHomography(
      view.map((p, i) => ({
        from: worlds[v][i],
        to: { x: (p.x - middle.x) / radiusPx, y: (p.y - middle.y) / radiusPx },
        u: 1 / radiusPx,
      })),
    );
    if ('reason' in fit) return { reason: `picture ${v + 1} fixes no homography: ${fit.reason}` };
    starts.push(fit.h.slice(0, 8).map((value) => value / fit.h[8]));
  }
  const own = freeCentre ? 4 : 2;
  const lensBy = (p: Float64Array) => ({
    k1: p[0] - away,
    k2: p[1] - away,
    centre: freeCentre ? { x: p[2] - away, y: p[3] - away } : { x: 0, y: 0 },
    radiusPx: 1,
  });
  const residuals = (p: Float64Array): Float64Array => {
    const lens = lensBy(p);
    const out: number[] = [];
    try {
      views.forEach((view, v) => {
        const from = own + 8 * v;
        const h = [...Array.from(p.subarray(from, from + 8), (value) => value - away), 1];
        view.forEach((point, i) => {
          const seen = distort(mapped(h, worlds[v][i]), lens);
          out.push(middle.x + radiusPx * seen.x - point.x, middle.y + radiusPx * seen.y - point.y);
        });
      });
    } catch (error) {
      // A trial step into a lens that folds: no step at all.
      if (error instanceof RangeError) return new Float64Array(2 * views.flat().length).fill(Number.NaN);
      throw error;
    }
    return Float64Array.from(out);
  };
  const start = Float64Array.from([...new Array<number>(own).fill(0), ...starts.flat()], (v) => v + away);
  const dof = 2 * views.flat().length - start.length;
  if (dof < 10) return { reason: 'the pictures show too few points' };
  const bounds = unbounded(start.length);
  bounds[0] = [away - largestK, away + largestK];
  bounds[1] = [away - largestK, away + largestK];
  const solved = leastSquares({
    start,
    bounds,
    residuals,
    linearised: (p) => differenced(residuals, p),
  });
  if ('reason' in solved) return solved;
  const { parameters, covariance, chiSquared } = solved;
  const variance = chiSquared / dof;
  const [uK1, uK2] = [0, 1].map((i) => Math.sqrt(variance * covariance[i][i]));
  const rK1K2 = covariance[0][1] / Math.sqrt(covariance[0][0] * covariance[1][1]);
  const found = lensBy(parameters);
  const lens = {
    k1: found.k1,
    k2: found.k2,
    centre: { x: middle.x + radiusPx * found.centre.x, y: middle.y + radiusPx * found.centre.y },
    radiusPx,
    uK1,
    uK2,
    rK1K2,
  };
  if (!(Math.sqrt(uK1 ** 2 + uK2 ** 2 + 2 * rK1K2 * uK1 * uK2) < leastUsefulCornerRel)) {
    return { reason: 'they leave the distortion at the corners open; let the target fill the picture' };
  }
  const fold = foldRadiusPx(lens);
  if (fold !== null && fold <= farthestCornerPx(lens.centre, picture)) {
    return { reason: 'they give a lens model that folds the picture; let the target fill it' };
  }
  return { lens, residualPx: Math.sqrt(variance), dof };
}
