import { slopesOf } from './spline.ts';

/** A frame about the body's place in it, and the plate behind, on the body's own grid. */
export interface LookSample {
  /** Grey levels, what the optics smear in from the background taken off. */
  readonly seen: Float64Array;
  readonly behind: Float64Array;
}

/** Appearance times coverage, and coverage, on a square grid. */
export interface Look {
  readonly appearance: Float64Array;
  readonly coverage: Float64Array;
}

/** Residuals beyond this many standard deviations show something else than body and plate. */
const rejectAt = 6;
const mostIterations = 20;
/** Fall of the residual of the equations at which the look is known well enough. */
const enough = 1e-4;
/** What a frame may move to fit: x, y, gain, offset. */
const columns = 4;

/**
 * The look of a body from many frames at once: A and α that fit I_i = A + (1 - α) B_i best, while the place, gain and offset of
 * the body in each frame stay free.
 *
 * Places were found with an imperfect look, so they carry errors that depend on the background of their frame. A fit pixel by
 * pixel at fixed places explains these errors by a wrong coverage, and repeating both converges hardly at all; with the places
 * eliminated (variable projection, Golub & Pereyra, SIAM J. Numer. Anal. 10 (1973) 413) one linear solve finds both.
 *
 * @param prior   a first guess of the coverage and its standard deviation at each pixel; 0: the coverage there is known
 * @param noise   standard deviation of a pixel's noise [grey levels]
 * Cost O(samples · pixels · iterations): conjugate gradients on the normal equations, preconditioned pixel by pixel.
 */
export function jointLook(
  samples: readonly LookSample[],
  look: Look,
  prior: { readonly coverage: Float64Array; readonly u: Float64Array },
  noise: number,
): Look {
  const side = Math.sqrt(look.coverage.length);
  const active = Int32Array.from(
    Array.from(look.coverage.keys()).filter((u) => prior.u[u] > 0 || look.coverage[u] > 0.01),
  );
  const n = active.length;
  const stiffness = Float64Array.from(active, (u) => (prior.u[u] > 0 ? (noise / prior.u[u]) ** 2 : 0));
  const free = Float64Array.from(active, (u) => (prior.u[u] > 0 ? 1 : 0));
  const frames = framesOf(samples, look, active, side, noise);

  // Unknowns: changes of A (first n) and of α (last n).
  const apply = (change: Float64Array, out: Float64Array) => {
    out.fill(0);
    const r = new Float64Array(n);
    for (const { behind, counts, basis } of frames) {
      for (let k = 0; k < n; k++) r[k] = counts[k] * (change[k] - change[n + k] * behind[k]);
      project(r, basis, n);
      for (let k = 0; k < n; k++) {
        out[k] += r[k];
        out[n + k] -= free[k] * behind[k] * r[k];
      }
    }
    for (let k = 0; k < n; k++) out[n + k] += stiffness[k] * change[n + k];
  };

  const right = new Float64Array(2 * n);
  const aa = new Float64Array(n);
  const ab = new Float64Array(n);
  const bb = stiffness.slice();
  const meanBehind = new Float64Array(n);
  for (const { residual, behind, counts } of frames) {
    for (let k = 0; k < n; k++) {
      right[k] += residual[k];
      right[n + k] -= free[k] * behind[k] * residual[k];
      aa[k] += counts[k];
      ab[k] -= free[k] * counts[k] * behind[k];
      bb[k] += free[k] * counts[k] * behind[k] * behind[k];
      meanBehind[k] += behind[k] / frames.length;
    }
  }
  for (let k = 0; k < n; k++) {
    const u = active[k];
    right[n + k] += stiffness[k] * (prior.coverage[u] - look.coverage[u]);
    aa[k] += 1e-3;
    if (free[k] === 0) bb[k] = 1;
  }
  const precondition = (from: Float64Array, to: Float64Array) => {
    for (let k = 0; k < n; k++) {
      const det = aa[k] * bb[k] - ab[k] * ab[k];
      to[k] = (bb[k] * from[k] - ab[k] * from[n + k]) / det;
      to[n + k] = (free[k] * (aa[k] * from[n + k] - ab[k] * from[k])) / det;
    }
  };
  const change = conjugateGradients(apply, precondition, right);
  keepPlace(change, look, meanBehind, active, side);

  const appearance = look.appearance.slice();
  const coverage = look.coverage.slice();
  for (let k = 0; k < n; k++) {
    const u = active[k];
    const wanted = coverage[u] + change[n + k];
    coverage[u] = Math.min(1, Math.max(0, wanted));
    // A coverage held back at its limits leaves the sum of body and background as it was.
    appearance[u] += change[k] + (coverage[u] - wanted) * meanBehind[k];
  }
  return { appearance, coverage };
}

/**
 * Nothing in the frames says where on the body its zero is: a change of look that is a shift of all of it, with every place
 * shifted back, fits as well. Takes the shift off by which the places would move over the mean background, so that the zero
 * stays where it was.
 */
function keepPlace(
  change: Float64Array,
  look: Look,
  behind: Float64Array,
  active: Int32Array,
  side: number,
): void {
  const a = slopesOf(look.appearance, side, side);
  const c = slopesOf(look.coverage, side, side);
  const n = active.length;
  let [xx, xy, yy, rx, ry] = [0, 0, 0, 0, 0];
  for (let k = 0; k < n; k++) {
    const u = active[k];
    const tx = a.slopeX[u] - behind[k] * c.slopeX[u];
    const ty = a.slopeY[u] - behind[k] * c.slopeY[u];
    const seen = change[k] - behind[k] * change[n + k];
    xx += tx * tx;
    xy += tx * ty;
    yy += ty * ty;
    rx += tx * seen;
    ry += ty * seen;
  }
  const det = xx * yy - xy * xy;
  if (!(det > 1e-9 * xx * yy)) return;
  const x = (rx * yy - ry * xy) / det;
  const y = (ry * xx - rx * xy) / det;
  for (let k = 0; k < n; k++) {
    const u = active[k];
    change[k] -= x * a.slopeX[u] + y * a.slopeY[u];
    change[n + k] -= x * c.slopeX[u] + y * c.slopeY[u];
  }
}

/** One frame at the active pixels. */
interface Frame {
  readonly behind: Float64Array;
  /** 0: the pixel shows something else. */
  readonly counts: Uint8Array;
  /** What is left between frame and look, with what a change of place, gain and offset could explain taken off. */
  readonly residual: Float64Array;
  /** Orthonormal basis of those changes, `columns` × n. */
  readonly basis: Float64Array;
}

function framesOf(
  samples: readonly LookSample[],
  look: Look,
  active: Int32Array,
  side: number,
  noise: number,
): Frame[] {
  const a = slopesOf(look.appearance, side, side);
  const c = slopesOf(look.coverage, side, side);
  const n = active.length;
  return samples.map(({ seen, behind }) => {
    const plate = Float64Array.from(active, (u) => behind[u]);
    const residual = Float64Array.from(
      active,
      (u) => seen[u] - look.appearance[u] - (1 - look.coverage[u]) * behind[u],
    );
    const counts = Uint8Array.from(residual, (r) => (Math.abs(r) <= rejectAt * noise ? 1 : 0));
    const basis = new Float64Array(columns * n);
    for (let k = 0; k < n; k++) {
      residual[k] *= counts[k];
      if (counts[k] === 0) continue;
      const u = active[k];
      basis[k] = a.slopeX[u] - plate[k] * c.slopeX[u];
      basis[n + k] = a.slopeY[u] - plate[k] * c.slopeY[u];
      basis[2 * n + k] = look.appearance[u];
      basis[3 * n + k] = look.coverage[u];
    }
    orthonormalise(basis, n);
    project(residual, basis, n);
    return { behind: plate, counts, residual, basis };
  });
}

/** Gram-Schmidt on the rows; a row that hangs on the others becomes zero. */
function orthonormalise(rows: Float64Array, n: number): void {
  for (let j = 0; j < columns; j++) {
    const before = lengthOf(rows, j, n);
    for (let i = 0; i < j; i++) {
      let share = 0;
      for (let k = 0; k < n; k++) share += rows[i * n + k] * rows[j * n + k];
      for (let k = 0; k < n; k++) rows[j * n + k] -= share * rows[i * n + k];
    }
    const length = lengthOf(rows, j, n);
    const scale = length > 1e-6 * before ? 1 / length : 0;
    for (let k = 0; k < n; k++) rows[j * n + k] *= scale;
  }
}

function lengthOf(rows: Float64Array, row: number, n: number): number {
  let sum = 0;
  for (let k = 0; k < n; k++) sum += rows[row * n + k] ** 2;
  return Math.sqrt(sum);
}

/** Takes the part of r that lies along the basis off. */
function project(r: Float64Array, basis: Float64Array, n: number): void {
  for (let j = 0; j < columns; j++) {
    const from = j * n;
    let share = 0;
    for (let k = 0; k < n; k++) share += basis[from + k] * r[k];
    for (let k = 0; k < n; k++) r[k] -= share * basis[from + k];
  }
}

/** Solves M x = right from x = 0; a symmetric, not negative M may have directions that nothing decides: x has none of them. */
function conjugateGradients(
  apply: (x: Float64Array, out: Float64Array) => void,
  precondition: (from: Float64Array, to: Float64Array) => void,
  right: Float64Array,
): Float64Array {
  const dot = (p: Float64Array, q: Float64Array) => p.reduce((s, v, i) => s + v * q[i], 0);
  const x = new Float64Array(right.length);
  const r = right.slice();
  const z = new Float64Array(right.length);
  precondition(r, z);
  const direction = z.slice();
  const applied = new Float64Array(right.length);
  let rz = dot(r, z);
  const first = rz;
  for (let i = 0; i < mostIterations && rz > enough * enough * first; i++) {
    apply(direction, applied);
    const curvature = dot(direction, applied);
    if (!(curvature > 0)) break;
    const step = rz / curvature;
    for (let k = 0; k < x.length; k++) {
      x[k] += step * direction[k];
      r[k] -= step * applied[k];
    }
    precondition(r, z);
    const next = dot(r, z);
    for (let k = 0; k < x.length; k++) direction[k] = z[k] + (next / rz) * direction[k];
    rz = next;
  }
  return x;
}
