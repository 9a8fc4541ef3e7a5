import { leastSquares } from '../../fit/leastSquares.ts';
import { unbounded } from '../../fit/problem.ts';
import type { TargetShape } from './shapes.ts';
import type { Window } from './window.ts';

/** A target as it was fitted in a window. */
export interface FittedTarget {
  /** Centre from the window's middle [px]. */
  readonly x: number;
  readonly y: number;
  /** Covariance of x and y [px²] from what is left over; for an edge along x of its normal only. */
  readonly covariance: { readonly xx: number; readonly xy: number; readonly yy: number };
  readonly own: readonly number[];
  /** Blur of its edges, √2 σ [px]. */
  readonly s: number;
  /** Light less dark, signed [grey levels]. */
  readonly contrast: number;
  /** What is left, root mean square [grey levels]. */
  readonly residual: number;
  /** Share of the variance in the window, shading apart, that the target explains. */
  readonly explained: number;
  /** Akaike's criterion with the correction for few points. */
  readonly aicc: number;
}

const startBlur = Math.SQRT2 * 0.8;
/** Added to parameters that may be next to nothing, so that a step counts against pixels. */
const away = 100;

/**
 * Least squares of a target's shape with contrast, level and a plane of shading in a window: coarse over its own parameters and
 * centres within reach, then Levenberg-Marquardt from the best.
 *
 * @param reachPx  how far the centre may be from the window's middle
 * @param known    where it was found in another window, in place of the coarse search
 * @returns null where none is found within reach
 */
export function fitTarget(
  shape: TargetShape,
  window: Window,
  reachPx: number,
  known?: KnownTarget,
): FittedTarget | null {
  const begin = known ? startAt(shape, window, known) : coarse(shape, window, reachPx);
  if (!begin) return null;
  const { dx, dy, grey } = window;
  const n = grey.length;
  // All that is known of an edge is its place across itself: x or y is free, whichever is nearer to its normal, the other held.
  const held = shape.kind === 'edge' ? (Math.abs(Math.cos(begin.own[0])) > Math.SQRT1_2 ? 'y' : 'x') : null;
  const start = held === null ? begin : onAxis(begin, held);
  const freeX = held === 'x' ? 0 : 1;
  const freeY = held === 'y' ? 0 : 1;
  const slope = new Float64Array(3 + shape.own);
  const count = freeX + freeY + 1 + shape.own + 4;
  const read = (p: Float64Array) => {
    let k = 0;
    const x = freeX ? p[k++] - away : start.x;
    const y = freeY ? p[k++] - away : start.y;
    const s = p[k++];
    const own = Array.from({ length: shape.own }, () => p[k++] - away);
    return { x, y, s, own, contrast: p[k], level: p[k + 1], gx: p[k + 2] - away, gy: p[k + 3] - away };
  };
  const residuals = (p: Float64Array) => {
    const { x, y, s, own, contrast, level, gx, gy } = read(p);
    if (!(s > 0.05)) return new Float64Array(n).fill(Number.NaN);
    return grey.map(
      (g, i) =>
        contrast * shape.value(dx[i] - x, dy[i] - y, s, own, slope) + level + gx * dx[i] + gy * dy[i] - g,
    );
  };
  const linearised = (p: Float64Array) => {
    const { x, y, s, own, contrast, level, gx, gy } = read(p);
    const jacobian = Array.from({ length: count }, () => new Float64Array(n));
    const left = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      const value = shape.value(dx[i] - x, dy[i] - y, s, own, slope);
      left[i] = contrast * value + level + gx * dx[i] + gy * dy[i] - grey[i];
      let k = 0;
      if (freeX) jacobian[k++][i] = -contrast * slope[0];
      if (freeY) jacobian[k++][i] = -contrast * slope[1];
      for (let o = 0; o <= shape.own; o++) jacobian[k++][i] = contrast * slope[2 + o];
      jacobian[k++][i] = value;
      jacobian[k++][i] = 1;
      jacobian[k++][i] = dx[i];
      jacobian[k][i] = dy[i];
    }
    return { residuals: left, jacobian };
  };
  const solved = leastSquares(
    {
      start: Float64Array.from([
        ...(freeX ? [start.x + away] : []),
        ...(freeY ? [start.y + away] : []),
        start.s,
        ...start.own.map((v) => v + away),
        start.contrast,
        start.level,
        away,
        away,
      ]),
      bounds: unbounded(count),
      residuals,
      linearised,
    },
    { mostSteps: 60 },
  );
  if ('reason' in solved) return null;
  const { parameters, covariance, chiSquared } = solved;
  const { x, y, s, own, contrast } = read(parameters);
  if (Math.hypot(x, y) > reachPx || !shape.fits(own, s, window.halfPx)) return null;
  const variance = chiSquared / (n - count);
  const wider = variance * correlationFactor(window, solved.at.residuals);
  const cov = (i: number, j: number) => wider * covariance[i][j];
  return {
    x,
    y,
    covariance: {
      xx: freeX ? cov(0, 0) : 0,
      xy: freeX && freeY ? cov(0, 1) : 0,
      yy: freeY ? cov(freeX, freeX) : 0,
    },
    own,
    s,
    contrast: (shape.kind === 'quadrant' || shape.kind === 'edge' ? 2 : 1) * contrast,
    residual: Math.sqrt(variance),
    explained: 1 - chiSquared / start.aboutPlane,
    aicc: n * Math.log(chiSquared / n) + 2 * count + (2 * count * (count + 1)) / (n - count - 1),
  };
}

/** A target by its shape's parameters, its centre from the window's middle [px]. */
export interface KnownTarget {
  readonly x: number;
  readonly y: number;
  readonly s: number;
  readonly own: readonly number[];
}

interface Start extends KnownTarget {
  readonly contrast: number;
  readonly level: number;
  /** Sum of squares about a plane of shading alone. */
  readonly aboutPlane: number;
}

/** The same edge, its place where it crosses the row or the column of the window's middle. */
function onAxis(start: Start, held: 'x' | 'y'): Start {
  const [c, s] = [Math.cos(start.own[0]), Math.sin(start.own[0])];
  const across = start.x * c + start.y * s;
  return held === 'y' ? { ...start, x: across / c, y: 0 } : { ...start, x: 0, y: across / s };
}

/** About so many pixels of a window do for the coarse search. */
const coarsePixels = 250;
/** A shape that explains less than this share at its best coarse place is not what is there. */
const coarseShare = 0.4;

/** Best of a grid of centres and own parameters, by what is explained beyond level and shading. */
function coarse(shape: TargetShape, window: Window, reachPx: number): Start | null {
  const { dx, dy, halfPx } = window;
  const every = Math.max(1, Math.round(Math.sqrt(dx.length / coarsePixels)));
  const few = Array.from(dx.keys()).filter((i) => dx[i] % every === 0 && dy[i] % every === 0);
  const flat = shape.kind === 'edge' ? withoutMean(window) : withoutPlane(window);
  const reach = Math.min(reachPx, 0.7 * halfPx);
  const step = Math.max(1, Math.min(halfPx / 4, 2));
  let best: KnownTarget | null = null;
  let most = coarseShare * few.reduce((s, i) => s + flat[i] ** 2, 0);
  for (const own of shape.starts(halfPx)) {
    for (let y = -reach; y <= reach + 1e-9; y += step) {
      for (let x = -reach; x <= reach + 1e-9; x += step) {
        if (Math.hypot(x, y) > reach + 1e-9) continue;
        const gained = gainedBy(shape, window, flat, few, { x, y, s: startBlur, own }).gained;
        if (gained <= most) continue;
        most = gained;
        best = { x, y, s: startBlur, own };
      }
    }
  }
  return best && startAt(shape, window, best);
}

/** What a target explains of pixels that shading was taken off, with its contrast. */
function gainedBy(
  shape: TargetShape,
  { dx, dy }: Window,
  flat: Float64Array,
  pixels: readonly number[],
  { x, y, s, own }: KnownTarget,
): { readonly gained: number; readonly contrast: number; readonly mean: number } {
  const slope = new Float64Array(3 + shape.own);
  let [sum, squares, product, left] = [0, 0, 0, 0];
  for (const i of pixels) {
    const v = shape.value(dx[i] - x, dy[i] - y, s, own, slope);
    sum += v;
    squares += v * v;
    product += v * flat[i];
    left += flat[i];
  }
  const n = pixels.length;
  const about = squares - (sum * sum) / n;
  const along = product - (sum * left) / n;
  if (!(about > 1e-6)) return { gained: 0, contrast: 0, mean: 0 };
  return { gained: along ** 2 / about, contrast: along / about, mean: sum / n };
}

/** A known target with the contrast and level it has in a window. */
function startAt(shape: TargetShape, window: Window, known: KnownTarget): Start | null {
  const { grey } = window;
  const flat = shape.kind === 'edge' ? withoutMean(window) : withoutPlane(window);
  const { contrast, mean } = gainedBy(shape, window, flat, Array.from(grey.keys()), known);
  if (contrast === 0) return null;
  return {
    ...known,
    contrast,
    level: grey.reduce((s, g) => s + g, 0) / grey.length - contrast * mean,
    aboutPlane: flat.reduce((s, v) => s + v * v, 0),
  };
}

/** What is left when the level is taken off: an edge is all but a plane, which would take it along. */
function withoutMean({ grey }: Window): Float64Array {
  const mean = grey.reduce((s, g) => s + g, 0) / grey.length;
  return grey.map((g) => g - mean);
}

/** What is left when level and shading are taken off; the window is all but symmetric, so that its three parts are at right angles. */
function withoutPlane({ dx, dy, grey }: Window): Float64Array {
  const n = grey.length;
  const mean = grey.reduce((s, g) => s + g, 0) / n;
  const along = (d: Float64Array) => {
    const middle = d.reduce((s, v) => s + v, 0) / n;
    const squares = d.reduce((s, v) => s + (v - middle) ** 2, 0);
    return { middle, by: d.reduce((s, v, i) => s + (v - middle) * grey[i], 0) / squares };
  };
  const [x, y] = [along(dx), along(dy)];
  return grey.map((g, i) => g - mean - x.by * (dx[i] - x.middle) - y.by * (dy[i] - y.middle));
}

/**
 * By how much the variance of what is fitted is larger than with independent pixels: coded footage has errors that neighbours
 * share. First-order correlation along rows and columns, where it is beyond chance.
 */
function correlationFactor({ dx, dy, halfPx }: Window, left: Float64Array): number {
  const side = 2 * halfPx + 3;
  const place = new Map<number, number>();
  for (let i = 0; i < left.length; i++) place.set((dy[i] + halfPx + 1) * side + dx[i] + halfPx + 1, i);
  const squares = left.reduce((s, v) => s + v * v, 0) / left.length;
  let factor = 1;
  for (const next of [1, side]) {
    let [sum, pairs] = [0, 0];
    for (const [at, i] of place) {
      const j = place.get(at + next);
      if (j === undefined) continue;
      sum += left[i] * left[j];
      pairs++;
    }
    const r = Math.min(0.9, sum / pairs / squares);
    if (r > 2 / Math.sqrt(pairs)) factor *= (1 + r) / (1 - r);
  }
  return factor;
}
