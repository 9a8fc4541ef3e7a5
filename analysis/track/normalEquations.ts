import type { Sampled } from './layer.ts';

/** Unknowns of a match in the order of the equations: place x and y, gain, offset, turn about the body's centre, growth. */
export const UNKNOWNS = 6;

/** Normal equations of one Gauss-Newton step, with the sums that tell how well the model fits. Buffers are reused. */
export interface NormalEquations {
  /** JᵀWJ, upper triangle of UNKNOWNS × UNKNOWNS, row by row. */
  readonly matrix: Float64Array;
  /** JᵀWr. */
  readonly right: Float64Array;
  /** Sums of weights, of the mask, and of weight times squared residual. */
  sumW: number;
  sumMask: number;
  sumWR2: number;
}

/** The window's pixels that count, as the frame shows them, and the model there. */
export interface Fitting {
  /** Indices into the window, the first `count` of them. */
  readonly pixel: Int32Array;
  count: number;
  /** By window pixel: grey level seen, that of the plate at the frame's brightness, weight of the mask. */
  readonly seen: Float64Array;
  readonly behind: Float64Array;
  /** Slopes of the plate there. */
  readonly behindX: Float64Array;
  readonly behindY: Float64Array;
  /** What the plate adds to the model: (1 - α)·B - s·∇α·∇B. */
  readonly free: Float64Array;
  readonly mask: Float64Array;
  /** Room to mark pixels in. */
  readonly foreign: Uint8Array;
  /** Appearance and coverage of the model. */
  readonly appearance: Sampled;
  readonly coverage: Sampled;
  readonly side: number;
}

/** Least-squares sums of frame ≈ g·A + o·α + (1 - α)·γB. */
export interface GainAndOffset {
  gain: number;
  offset: number;
}

/** Fills `free` for a point spread of the given variance. */
export function fillFree(
  { pixel, count, behind, behindX, behindY, free, coverage }: Fitting,
  spreadPx2: number,
): void {
  const { value, slopeX, slopeY } = coverage;
  for (let k = 0; k < count; k++) {
    const u = pixel[k];
    free[u] = (1 - value[u]) * behind[u] - spreadPx2 * (slopeX[u] * behindX[u] + slopeY[u] * behindY[u]);
  }
}

/** Gain and offset of the body that fit best where the model stands; false if fewer than nine pixels count or the two cannot be told apart. */
export function fitGainAndOffset(
  { pixel, count, seen, free, mask, appearance, coverage }: Fitting,
  into: GainAndOffset,
): boolean {
  const a = appearance.value;
  const c = coverage.value;
  let aa = 0;
  let ac = 0;
  let cc = 0;
  let ai = 0;
  let ci = 0;
  for (let k = 0; k < count; k++) {
    const u = pixel[k];
    const m = mask[u];
    const av = a[u];
    const cv = c[u];
    const body = seen[u] - free[u];
    aa += m * av * av;
    ac += m * av * cv;
    cc += m * cv * cv;
    ai += m * av * body;
    ci += m * cv * body;
  }
  const det = aa * cc - ac * ac;
  if (count < 9 || det <= 1e-9 * aa * cc) return false;
  into.gain = (ai * cc - ci * ac) / det;
  into.offset = (ci * aa - ai * ac) / det;
  return true;
}

/** Share of the pixels that must be left, or neighbours are not left out. */
const leastKept = 0.7;

/**
 * Leaves out pixels that show something else than body and plate, and their neighbours, into which the optics smear it; a body
 * of so few pixels that this would leave too little keeps the neighbours.
 *
 * @param limit  residual beyond which a pixel is foreign [grey levels]
 * @returns whether there were any
 */
export function leaveOutForeign(fitting: Fitting, { gain, offset }: GainAndOffset, limit: number): boolean {
  const { pixel, count, seen, free, appearance, coverage, foreign, side } = fitting;
  foreign.fill(0);
  let any = false;
  for (let k = 0; k < count; k++) {
    const u = pixel[k];
    const r = seen[u] - (gain * appearance.value[u] + offset * coverage.value[u] + free[u]);
    if (r <= limit && r >= -limit) continue;
    any = true;
    const column = u % side;
    for (let j = u - side; j <= u + side; j += side) {
      for (let i = j - (column > 0 ? 1 : 0); i <= j + (column < side - 1 ? 1 : 0); i++)
        if (i >= 0 && i < foreign.length) foreign[i] = Math.max(foreign[i], NEIGHBOUR);
    }
    foreign[u] = FOREIGN;
  }
  if (!any) return false;
  let clean = 0;
  for (let k = 0; k < count; k++) if (foreign[pixel[k]] === 0) clean++;
  const leftOut = clean >= leastKept * count ? NEIGHBOUR : FOREIGN;
  let kept = 0;
  for (let k = 0; k < count; k++) if (foreign[pixel[k]] < leftOut) pixel[kept++] = pixel[k];
  fitting.count = kept;
  return true;
}

const NEIGHBOUR = 1;
const FOREIGN = 2;

export function emptyEquations(): NormalEquations {
  return {
    matrix: new Float64Array(UNKNOWNS * UNKNOWNS),
    right: new Float64Array(UNKNOWNS),
    sumW: 0,
    sumMask: 0,
    sumWR2: 0,
  };
}

/**
 * Sums up the equations over the pixels that count. Sums are kept in locals, and the turn's only when it is asked for: this is
 * the innermost loop of tracking.
 *
 * @param huber       residuals beyond this lose weight as 1/|r| [grey levels]
 * @param turnsAbout  the body's centre in the window's columns and rows, where its turn and growth are unknown too
 */
export function fillEquations(
  { pixel, count, seen, behind, free, mask, appearance, coverage, side }: Fitting,
  { gain, offset }: GainAndOffset,
  huber: number,
  turnsAbout: { readonly x: number; readonly y: number } | null,
  into: NormalEquations,
): void {
  const a = appearance.value;
  const ax = appearance.slopeX;
  const ay = appearance.slopeY;
  const c = coverage.value;
  const cx = coverage.slopeX;
  const cy = coverage.slopeY;
  let xx = 0;
  let xy = 0;
  let xa = 0;
  let xc = 0;
  let yy = 0;
  let ya = 0;
  let yc = 0;
  let aa = 0;
  let ac = 0;
  let cc = 0;
  let rx = 0;
  let ry = 0;
  let ra = 0;
  let rc = 0;
  let xt = 0;
  let yt = 0;
  let at = 0;
  let ct = 0;
  let tt = 0;
  let rt = 0;
  let xg = 0;
  let yg = 0;
  let ag = 0;
  let cg = 0;
  let tg = 0;
  let gg = 0;
  let rg = 0;
  let sumW = 0;
  let sumMask = 0;
  let sumWR2 = 0;
  for (let k = 0; k < count; k++) {
    const u = pixel[k];
    const m = mask[u];
    const av = a[u];
    const cv = c[u];
    const r = seen[u] - (gain * av + offset * cv + free[u]);
    const size = r < 0 ? -r : r;
    const w = size > huber ? (m * huber) / size : m;
    const lift = offset - behind[u];
    const jx = -(gain * ax[u] + lift * cx[u]);
    const jy = -(gain * ay[u] + lift * cy[u]);
    const wx = w * jx;
    const wy = w * jy;
    const wa = w * av;
    const wc = w * cv;
    xx += wx * jx;
    xy += wx * jy;
    xa += wx * av;
    xc += wx * cv;
    yy += wy * jy;
    ya += wy * av;
    yc += wy * cv;
    aa += wa * av;
    ac += wa * cv;
    cc += wc * cv;
    rx += wx * r;
    ry += wy * r;
    ra += wa * r;
    rc += wc * r;
    sumW += w;
    sumMask += m;
    sumWR2 += w * r * r;
    if (turnsAbout) {
      // A turn by θ carries a point (x, y) from the centre by θ (-y, x), growth by (x, y).
      const away = (u % side) - turnsAbout.x;
      const below = Math.floor(u / side) - turnsAbout.y;
      const jt = jy * away - jx * below;
      const jg = jx * away + jy * below;
      const wt = w * jt;
      xt += wt * jx;
      yt += wt * jy;
      at += wt * av;
      ct += wt * cv;
      tt += wt * jt;
      rt += wt * r;
      const wg = w * jg;
      xg += wg * jx;
      yg += wg * jy;
      ag += wg * av;
      cg += wg * cv;
      tg += wt * jg;
      gg += wg * jg;
      rg += wg * r;
    }
  }
  const { matrix, right } = into;
  matrix.set([xx, xy, xa, xc, xt, xg], 0);
  matrix.set([yy, ya, yc, yt, yg], UNKNOWNS + 1);
  matrix.set([aa, ac, at, ag], 2 * (UNKNOWNS + 1));
  matrix.set([cc, ct, cg], 3 * (UNKNOWNS + 1));
  matrix.set(turnsAbout ? [tt, tg] : [1, 0], 4 * (UNKNOWNS + 1));
  matrix[5 * (UNKNOWNS + 1)] = turnsAbout ? gg : 1;
  right.set([rx, ry, ra, rc, rt, rg]);
  into.sumW = sumW;
  into.sumMask = sumMask;
  into.sumWR2 = sumWR2;
}

/** How like the frame the model is, and what the residual says of its spread. */
export interface Likeness {
  /** Zero-normalised cross-correlation of model and frame over the mask. */
  readonly score: number;
  /** Sums of r·t and t² over the pixels, where t is what a unit of spread adds to the model. */
  readonly spreadPull: number;
  readonly spreadWeight: number;
}

export function likeness(
  { pixel, count, seen, behindX, behindY, free, mask, appearance, coverage }: Fitting,
  { gain, offset }: GainAndOffset,
): Likeness {
  const { value, slopeX, slopeY } = coverage;
  let n = 0;
  let s = 0;
  let t = 0;
  let ss = 0;
  let tt = 0;
  let st = 0;
  let spreadPull = 0;
  let spreadWeight = 0;
  for (let k = 0; k < count; k++) {
    const u = pixel[k];
    const m = mask[u];
    const level = seen[u];
    const modelled = gain * appearance.value[u] + offset * value[u] + free[u];
    n += m;
    s += m * level;
    t += m * modelled;
    ss += m * level * level;
    tt += m * modelled * modelled;
    st += m * level * modelled;
    const smear = -(slopeX[u] * behindX[u] + slopeY[u] * behindY[u]);
    spreadPull += m * smear * (level - modelled);
    spreadWeight += m * smear * smear;
  }
  const varS = ss - (s * s) / n;
  const varT = tt - (t * t) / n;
  const score = varS > 0 && varT > 0 ? (st - (s * t) / n) / Math.sqrt(varS * varT) : 0;
  return { score, spreadPull, spreadWeight };
}
