/** A body's picture about one place, from noise-free renders of the maker [grey levels], all of one size. */
export interface BodyRenders {
  /** With the body moved by ± stepPx along one axis. */
  readonly right: Float64Array;
  readonly left: Float64Array;
  readonly below: Float64Array;
  readonly above: Float64Array;
  /** What the body adds to a picture in which it covers without shining: the picture's change with the body's gain. */
  readonly shine: Float64Array;
  /** Share of each pixel that the body covers: the picture's change with the body's offset. */
  readonly coverage: Float64Array;
}

export interface AxisVariances {
  readonly x: number;
  readonly y: number;
}

/** Renders lie this far on either side of the place: the difference is the slope, its error a thousandth of it for optics of 0.7 px. */
export const stepPx = 0.05;

/**
 * Cramér-Rao bound of a body's position in one frame with white Gaussian noise: the inverse of F = Σ ∇I ∇Iᵀ/σ², with the
 * body's gain and offset as further unknowns and the background known. Kay, Fundamentals of Statistical Signal Processing
 * (1993), eq. 3.31.
 *
 * @param within  pixels that count: the stated patch
 * @param sigma   noise of a pixel, rounding included [grey levels]
 * @returns least variances of an unbiased position [px²]
 */
export function positionBound(
  renders: BodyRenders,
  widthPx: number,
  patch: { readonly xPx: number; readonly yPx: number; readonly diameterPx: number },
  sigma: number,
): AxisVariances {
  const { right, left, below, above, shine, coverage } = renders;
  const f = new Float64Array(16);
  const j = new Float64Array(4);
  for (let i = 0; i < right.length; i++) {
    const column = i % widthPx;
    const row = (i - column) / widthPx;
    if (Math.hypot(column - patch.xPx, row - patch.yPx) > patch.diameterPx / 2) continue;
    j[0] = (right[i] - left[i]) / (2 * stepPx);
    j[1] = (below[i] - above[i]) / (2 * stepPx);
    j[2] = shine[i];
    j[3] = coverage[i];
    for (let a = 0; a < 4; a++) for (let b = 0; b < 4; b++) f[4 * a + b] += j[a] * j[b];
  }
  // A body of one grey cannot tell gain from offset: eliminating one of them is enough then, and what is left of the other is rounding.
  let rest = eliminated(f, 2);
  if (rest[15] > 1e-6 * f[15]) rest = eliminated(rest, 3);
  const det = rest[0] * rest[5] - rest[1] * rest[1];
  return { x: (sigma * sigma * rest[5]) / det, y: (sigma * sigma * rest[0]) / det };
}

/** Information on the other unknowns once unknown k has been left free (Schur complement). */
function eliminated(f: Float64Array, k: number): Float64Array {
  return f.map((v, i) => {
    const [a, b] = [i >> 2, i & 3];
    return a === k || b === k ? 0 : v - (f[4 * a + k] * f[4 * k + b]) / f[5 * k];
  });
}

/** Bound of a whole track whose instants have these bounds: its RMS error squares to the mean. */
export function meanBound(bounds: readonly AxisVariances[]): AxisVariances {
  const mean = (of: (b: AxisVariances) => number) => bounds.reduce((s, b) => s + of(b), 0) / bounds.length;
  return { x: mean((b) => b.x), y: mean((b) => b.y) };
}
