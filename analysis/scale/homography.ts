import { Matrix, SingularValueDecomposition } from 'ml-matrix';
import { leastSquares } from '../fit/leastSquares.ts';
import { unbounded } from '../fit/problem.ts';
import { onOneLine } from './onOneLine.ts';
import type { PlanePoint } from './planePoint.ts';

/** A 3 × 3 matrix row by row, up to a factor. */
export type Homography = readonly number[];

/** A place in both planes; u is the standard uncertainty of `to` along each axis, that of `from` included. */
export interface PlacePair {
  readonly from: PlanePoint;
  readonly to: PlanePoint;
  readonly u: number;
}

export interface HomographyFit {
  readonly h: Homography;
  /** `to` less the map of `from`, in the order of the pairs. */
  readonly residuals: readonly PlanePoint[];
  /** Sum of squares of the residuals over their u; with 2n - 8 degrees of freedom. */
  readonly chiSquared: number;
  readonly dof: number;
  /** The map with each independent part of its error at +1 standard uncertainty, widened where the residuals ask for it. */
  readonly parts: readonly Homography[];
}

/** Larger than any element of a normalised homography. */
const awayFromZero = 10;

export function mapped(h: Homography, { x, y }: PlanePoint): PlanePoint {
  const w = h[6] * x + h[7] * y + h[8];
  return { x: (h[0] * x + h[1] * y + h[2]) / w, y: (h[3] * x + h[4] * y + h[5]) / w };
}

/** @throws RangeError if the map has no inverse */
export function inverted(h: Homography): Homography {
  const [a, b, c, d, e, f, g, i, j] = h;
  const inverse = [
    e * j - f * i,
    c * i - b * j,
    b * f - c * e,
    f * g - d * j,
    a * j - c * g,
    c * d - a * f,
    d * i - e * g,
    b * g - a * i,
    a * e - b * d,
  ];
  const determinant = a * inverse[0] + b * inverse[3] + c * inverse[6];
  if (!(Math.abs(determinant) > 0)) throw new RangeError('inverted: the homography is singular');
  return inverse.map((value) => value / determinant);
}

/**
 * Homography between two planes from four pairs or more: normalised direct linear transformation, then least squares on the
 * reprojection error (Hartley & Zisserman, Multiple View Geometry, 2nd ed. 2004, algorithms 4.2 and 4.3; covariance 5.2.3).
 *
 * @returns a reason in words where the pairs do not fix one
 * @throws RangeError with fewer than four pairs
 */
export function fitHomography(pairs: readonly PlacePair[]): HomographyFit | { readonly reason: string } {
  if (pairs.length < 4) throw new RangeError(`fitHomography: ${pairs.length} pairs, but four are needed`);
  const line = onOneLine(pairs.map((p) => p.from)) ?? onOneLine(pairs.map((p) => p.to));
  if (line) return { reason: line };
  const from = normaliser(pairs.map((p) => p.from));
  const to = normaliser(pairs.map((p) => p.to));
  const normal = pairs.map((p) => ({
    from: from.apply(p.from),
    to: to.apply(p.to),
    u: to.scale * p.u,
  }));
  const start = directLinear(normal);
  const whole = (eight: ArrayLike<number>): Homography =>
    product(to.inverse, product([...Array.from(eight), 1], from.matrix));
  const residuals = (eight: Float64Array): Float64Array =>
    Float64Array.from(
      normal.flatMap((p) => {
        const at = mapped([...eight, 1], p.from);
        return [(at.x - p.to.x) / p.u, (at.y - p.to.y) / p.u];
      }),
    );
  // Elements of a normalised map are of order one or next to nothing: a step counts against 1, not against a vanishing one.
  const elements = (p: Float64Array) => p.map((value) => value - awayFromZero);
  const solved = leastSquares({
    start: Float64Array.from(start.slice(0, 8), (value) => value / start[8] + awayFromZero),
    bounds: unbounded(8),
    residuals: (p) => residuals(elements(p)),
    linearised: (p) => ({ residuals: residuals(elements(p)), jacobian: slopes(elements(p), normal) }),
  });
  if ('reason' in solved) return { reason: solved.reason };
  const { covariance, chiSquared } = solved;
  const parameters = elements(solved.parameters);
  if (covariance.some((row, i) => !Number.isFinite(row[i]))) {
    return { reason: 'three of them lie on one line, so that the map is not fixed' };
  }
  const dof = 2 * pairs.length - 8;
  const birge = dof > 0 ? Math.sqrt(Math.max(1, chiSquared / dof)) : 1;
  const h = whole(parameters);
  return {
    h,
    residuals: pairs.map((p) => {
      const at = mapped(h, p.from);
      return { x: p.to.x - at.x, y: p.to.y - at.y };
    }),
    chiSquared,
    dof,
    parts: independentParts(covariance).map((part) =>
      whole(parameters.map((value, i) => value + birge * part[i])),
    ),
  };
}

/** Directions along which errors of a covariance are independent, each one standard uncertainty long. */
export function independentParts(covariance: readonly Float64Array[]): number[][] {
  const n = covariance.length;
  const scale = covariance.map((row, i) => Math.sqrt(row[i]) || 1);
  const r = new Matrix(covariance.map((row, i) => Array.from(row, (c, j) => c / (scale[i] * scale[j]))));
  const svd = new SingularValueDecomposition(r);
  return svd.diagonal.flatMap((variance, k) =>
    variance > 0
      ? [
          Array.from(
            { length: n },
            (_, i) => Math.sqrt(variance) * svd.leftSingularVectors.get(i, k) * scale[i],
          ),
        ]
      : [],
  );
}

/** Derivatives of the residuals by the first eight elements, the ninth held at 1. */
function slopes(eight: Float64Array, pairs: readonly PlacePair[]): Float64Array[] {
  const columns = Array.from({ length: 8 }, () => new Float64Array(2 * pairs.length));
  pairs.forEach(({ from, u }, i) => {
    const { x, y } = from;
    const at = mapped([...eight, 1], from);
    const w = (eight[6] * x + eight[7] * y + 1) * u;
    [x, y, 1].forEach((value, k) => {
      columns[k][2 * i] = value / w;
      columns[3 + k][2 * i + 1] = value / w;
    });
    [x, y].forEach((value, k) => {
      columns[6 + k][2 * i] = (-at.x * value) / w;
      columns[6 + k][2 * i + 1] = (-at.y * value) / w;
    });
  });
  return columns;
}

/** Brings points to their centroid and a mean distance of √2 from it (Hartley 1997). */
function normaliser(points: readonly PlanePoint[]) {
  const n = points.length;
  const [mx, my] = [points.reduce((s, p) => s + p.x, 0) / n, points.reduce((s, p) => s + p.y, 0) / n];
  const s = (Math.SQRT2 * n) / points.reduce((sum, p) => sum + Math.hypot(p.x - mx, p.y - my), 0);
  return {
    scale: s,
    apply: (p: PlanePoint): PlanePoint => ({ x: s * (p.x - mx), y: s * (p.y - my) }),
    matrix: [s, 0, -s * mx, 0, s, -s * my, 0, 0, 1] as const,
    inverse: [1 / s, 0, mx, 0, 1 / s, my, 0, 0, 1] as const,
  };
}

/** Unit null vector of the equations of 4.1: the right singular vector of the smallest singular value. */
function directLinear(pairs: readonly { readonly from: PlanePoint; readonly to: PlanePoint }[]): number[] {
  const rows = pairs.flatMap(({ from: { x, y }, to: { x: u, y: v } }) => [
    [0, 0, 0, -x, -y, -1, v * x, v * y, v],
    [x, y, 1, 0, 0, 0, -u * x, -u * y, -u],
  ]);
  // With four pairs there are eight rows: a row of zeros makes the ninth singular vector come out.
  if (rows.length < 9) rows.push(new Array<number>(9).fill(0));
  return new SingularValueDecomposition(new Matrix(rows)).rightSingularVectors.getColumn(8);
}

function product(a: Homography, b: Homography): number[] {
  return Array.from({ length: 9 }, (_, k) => {
    const [i, j] = [Math.floor(k / 3), k % 3];
    return a[3 * i] * b[j] + a[3 * i + 1] * b[3 + j] + a[3 * i + 2] * b[6 + j];
  });
}
