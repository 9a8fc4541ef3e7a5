import { erf, erfSlope } from './erf.ts';

export type TargetKind = 'quadrant' | 'cross' | 'disc' | 'edge';

/**
 * What a target looks like: a function from -1 … 1 or 0 … 1 over the picture. Optics and pixel area together blur an edge as a
 * Gaussian does (the pixel's box adds 1/12 px² to its variance).
 */
export interface TargetShape {
  readonly kind: TargetKind;
  /** How many own parameters it has, after x, y and blur. */
  readonly own: number;
  /** Own parameters to begin with, for a window of this radius [px]. */
  starts(halfPx: number): number[][];
  /**
   * Value at (dx, dy) from the centre with blur s = √2 σ [px].
   *
   * @param slope  gets the derivatives by dx, dy, s and the own parameters
   */
  value(dx: number, dy: number, s: number, own: ArrayLike<number>, slope: Float64Array): number;
  /** Whether what was fitted can be this target in a window of this radius. */
  fits(own: ArrayLike<number>, s: number, halfPx: number): boolean;
}

/** Directions to begin with: of a crossing within a quarter turn, of an edge within a half. */
const crossings = [0, 1, 2, 3, 4, 5].map((k) => (k * Math.PI) / 12);
const directions = [0, 1, 2, 3, 4, 5, 6, 7].map((k) => (k * Math.PI) / 8);

/** Two edges that cross, light and dark by turns: quadrant targets and corners of a chessboard. Own: the edges' directions. */
const quadrant: TargetShape = {
  kind: 'quadrant',
  own: 2,
  starts: () => crossings.map((a) => [a, a + Math.PI / 2]),
  value(dx, dy, s, own, slope) {
    const [c1, s1] = [Math.cos(own[0]), Math.sin(own[0])];
    const [c2, s2] = [Math.cos(own[1]), Math.sin(own[1])];
    const p = (dx * c1 + dy * s1) / s;
    const q = (dx * c2 + dy * s2) / s;
    const [ep, eq] = [erf(p), erf(q)];
    const [bp, bq] = [(erfSlope(p) * eq) / s, (erfSlope(q) * ep) / s];
    slope[0] = bp * c1 + bq * c2;
    slope[1] = bp * s1 + bq * s2;
    slope[2] = -bp * p - bq * q;
    slope[3] = bp * (dy * c1 - dx * s1);
    slope[4] = bq * (dy * c2 - dx * s2);
    return ep * eq;
  },
  fits: (own) => Math.abs(Math.sin(own[1] - own[0])) > 0.7,
};

/** A stripe of width w along a direction, and its derivatives by p (the distance across) and w. */
function stripe(p: number, w: number, s: number, out: Float64Array): number {
  const [a, b] = [(p + w / 2) / s, (p - w / 2) / s];
  const [da, db] = [erfSlope(a) / (2 * s), erfSlope(b) / (2 * s)];
  out[0] = da - db;
  out[1] = (da + db) / 2;
  out[2] = -da * a + db * b;
  return (erf(a) - erf(b)) / 2;
}

const one = new Float64Array(3);
const other = new Float64Array(3);

/** Two stripes that cross. Own: their directions and their width. */
const cross: TargetShape = {
  kind: 'cross',
  own: 3,
  starts: (half) =>
    crossings.flatMap((a) => [1.5, 3, 5, 8].filter((w) => w < half).map((w) => [a, a + Math.PI / 2, w])),
  value(dx, dy, s, own, slope) {
    const [c1, s1] = [Math.cos(own[0]), Math.sin(own[0])];
    const [c2, s2] = [Math.cos(own[1]), Math.sin(own[1])];
    const a = stripe(dx * c1 + dy * s1, own[2], s, one);
    const b = stripe(dx * c2 + dy * s2, own[2], s, other);
    const [fa, fb] = [1 - b, 1 - a];
    slope[0] = fa * one[0] * c1 + fb * other[0] * c2;
    slope[1] = fa * one[0] * s1 + fb * other[0] * s2;
    slope[2] = fa * one[2] + fb * other[2];
    slope[3] = fa * one[0] * (dy * c1 - dx * s1);
    slope[4] = fb * other[0] * (dy * c2 - dx * s2);
    slope[5] = fa * one[1] + fb * other[1];
    return 1 - (1 - a) * (1 - b);
  },
  fits: (own, s, half) => Math.abs(Math.sin(own[1] - own[0])) > 0.7 && own[2] > 0.4 * s && own[2] < half,
};

/** A disc or, seen from aside, an ellipse. Own: radius and two numbers of its stretch. */
const disc: TargetShape = {
  kind: 'disc',
  own: 3,
  starts: (half) => [1.5, 2.5, 4, 6, 8.5, 12, 17, 24].filter((r) => r < half - 1.5).map((r) => [r, 0, 0]),
  value(dx, dy, s, own, slope) {
    const [radius, e, f] = [own[0], own[1], own[2]];
    const r = Math.sqrt(Math.max(1e-12, (1 + e) * dx * dx + 2 * f * dx * dy + (1 - e) * dy * dy));
    const p = (radius - r) / s;
    const b = erfSlope(p) / (2 * s);
    slope[0] = (-b * ((1 + e) * dx + f * dy)) / r;
    slope[1] = (-b * ((1 - e) * dy + f * dx)) / r;
    slope[2] = -b * p;
    slope[3] = b;
    slope[4] = (-b * (dx * dx - dy * dy)) / (2 * r);
    slope[5] = (-b * dx * dy) / r;
    return (1 + erf(p)) / 2;
  },
  fits: (own, s, half) => own[0] > 0.7 * s && own[0] + s < half + 0.5 && Math.hypot(own[1], own[2]) < 0.5,
};

/** One straight edge. It has a place across itself only: y of its own frame is held by the caller. Own: its direction. */
const edge: TargetShape = {
  kind: 'edge',
  own: 1,
  starts: () => directions.map((a) => [a]),
  value(dx, dy, s, own, slope) {
    const [c, sn] = [Math.cos(own[0]), Math.sin(own[0])];
    const p = (dx * c + dy * sn) / s;
    const b = erfSlope(p) / s;
    slope[0] = b * c;
    slope[1] = b * sn;
    slope[2] = -b * p;
    slope[3] = b * (dy * c - dx * sn);
    return erf(p);
  },
  fits: () => true,
};

export const targetShapes: readonly TargetShape[] = [quadrant, cross, disc, edge];
