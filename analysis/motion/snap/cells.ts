/**
 * Cells of time, on each of which the fourth derivative (snap) is constant: splines of degree 4 in their B-spline basis. On cell j
 * the functions j … j + 4 differ from zero.
 */
export interface Cells {
  /** Increasing, one more than cells. */
  readonly edges: Float64Array;
  readonly count: number;
  /** Functions of the basis: count + 4. */
  readonly size: number;
  /** Per cell 5 × 5: coefficient of s^k (row k) of each of its functions (column), s = (t - middle) / width in [-½, ½]. */
  readonly powers: Float64Array;
  /** Per cell: snap of each of its five functions. */
  readonly snap: Float64Array;
  /** Per cell 15: upper triangle, row by row, of the products of these. */
  readonly snapProducts: Float64Array;
}

/** Functions that differ from zero on a cell. */
export const order = 5;
/** Entries of a symmetric matrix of that size. */
export const triangle = 15;

/** The basis on given edges; beyond both ends the knots go on with the width of the outer cell. */
export function cellsOn(edges: Float64Array): Cells {
  const count = edges.length - 1;
  const first = edges[1] - edges[0];
  const last = edges[count] - edges[count - 1];
  const knots = new Float64Array(count + 9);
  for (let k = 0; k < 4; k++) {
    knots[k] = edges[0] - (4 - k) * first;
    knots[count + 5 + k] = edges[count] + (k + 1) * last;
  }
  knots.set(edges, 4);
  const powers = new Float64Array(count * 25);
  const snap = new Float64Array(count * order);
  for (let j = 0; j < count; j++) {
    const width = edges[j + 1] - edges[j];
    const functions = onCell(knots, j + 4, width);
    for (let m = 0; m < order; m++) {
      for (let k = 0; k < order; k++) powers[j * 25 + k * order + m] = functions[m][k];
      snap[j * order + m] = (24 * functions[m][4]) / width ** 4;
    }
  }
  return { edges, count, size: count + 4, powers, snap, snapProducts: productsOf(snap, count) };
}

function productsOf(snap: Float64Array, count: number): Float64Array {
  const products = new Float64Array(count * triangle);
  for (let j = 0; j < count; j++) {
    let p = j * triangle;
    for (let m = 0; m < order; m++)
      for (let d = m; d < order; d++) products[p++] = snap[j * order + m] * snap[j * order + d];
  }
  return products;
}

/** The five functions that differ from zero between knots i and i + 1, as polynomials in s: recursion of de Boor and Cox. */
function onCell(knots: Float64Array, i: number, width: number): number[][] {
  const middle = (knots[i] + knots[i + 1]) / 2;
  let lower: number[][] = [[1]];
  for (let degree = 1; degree < order; degree++) {
    const next: number[][] = Array.from({ length: degree + 1 }, () => new Array(degree + 1).fill(0));
    for (let m = 0; m < degree; m++) {
      // Function m of the lower degree starts at knot i - degree + 1 + m.
      const from = knots[i - degree + 1 + m];
      const to = knots[i + 1 + m];
      for (let k = 0; k < degree; k++) {
        const c = lower[m][k] / (to - from);
        next[m + 1][k] += c * (middle - from);
        next[m + 1][k + 1] += c * width;
        next[m][k] += c * (to - middle);
        next[m][k + 1] -= c * width;
      }
    }
    lower = next;
  }
  return lower;
}

/** Index of the cell that holds a time; the outer ones beyond the ends. */
export function cellAt({ edges, count }: Cells, time: number): number {
  let low = 0;
  let high = count - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (time >= edges[middle]) low = middle;
    else high = middle - 1;
  }
  return low;
}

/** Writes the five functions' derivative of a degree (0 … 4) at a time in cell j into `row`. */
export function writeRow(
  { edges, powers }: Cells,
  j: number,
  time: number,
  derivative: number,
  row: Float64Array,
): void {
  const width = edges[j + 1] - edges[j];
  const s = (time - (edges[j] + edges[j + 1]) / 2) / width;
  row.fill(0);
  for (let k = order - 1; k >= derivative; k--) {
    let factor = 1;
    for (let d = 0; d < derivative; d++) factor *= k - d;
    for (let m = 0; m < order; m++) row[m] = row[m] * s + factor * powers[j * 25 + k * order + m];
  }
  if (derivative > 0) {
    const scale = width ** -derivative;
    for (let m = 0; m < order; m++) row[m] *= scale;
  }
}
