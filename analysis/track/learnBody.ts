import { makeLayer, REACH } from './layer.ts';
import type { BodyModel, Plate } from './match.ts';
import { slopesOf } from './spline.ts';

/** What was seen of a body while it rested, around the whole pixel that is its zero. */
export interface StillBody {
  readonly centreX: number;
  readonly centreY: number;
  readonly half: number;
  /** Mean grey levels of the still frames, (2 · (half + REACH) + 1)² values. */
  readonly mean: Float64Array;
  readonly frames: number;
  /** Standard deviation of one frame's noise [grey levels]. */
  readonly noise: number;
}

/** Fewer covered pixels than this are no body that the plate could tell from the background. */
const leastCovered = 9;
/** Blur of a coverage edge that stands for the optics, where nothing better is known [px]. */
const opticsPx = 0.7;

/** Blur of the difference in which a body is noticed [px]: white noise falls to 1/(2 σ √π) of it. */
const noticingPx = 0.8;
/** How far beyond the guessed rim a body may reach after all [px], and how far the guess may be off away from its rim. */
const beyondPx = 4;
const uAway = 0.1;

/** A first guess of a body's coverage, with its standard deviation at each pixel of the window with its border. */
export interface CoverageGuess {
  readonly coverage: Float64Array;
  readonly u: Float64Array;
}

/**
 * First guess of a body's coverage from how its rest frames differ from the plate: pixels that differ by a good part of the
 * body's contrast, closed and filled, with an edge as soft as usual optics make it. It only has to be roughly right: `matting`
 * refines it from the frames in which the body passes over other background.
 *
 * @returns null when the body hardly differs from the plate
 */
export function guessCoverage(still: StillBody, behind: Float64Array): CoverageGuess | null {
  const outer = still.half + REACH;
  const side = 2 * outer + 1;
  // Smoothed over about a pixel, which takes more from the noise than from a body that is worth following.
  const signed = smoothed(
    still.mean.map((v, u) => v - behind[u]),
    side,
    noticingPx,
  );
  const difference = signed.map((d, u) =>
    Math.hypot((u % side) - outer, Math.floor(u / side) - outer) <= still.half + 0.5 ? Math.abs(d) : 0,
  );
  const left = 1 / (2 * noticingPx * Math.sqrt(Math.PI));
  const noticeable = Math.max(1, 4 * left * still.noise * Math.sqrt(1 / still.frames + 0.04));
  const noticed = difference.filter((d) => d > noticeable).sort();
  if (noticed.length < leastCovered) return null;
  // Optics smear the edge: half coverage is where the difference is about half of what it is inside. But a shaded body may
  // differ little from the board on one side: what differs noticeably counts half.
  const contrast = noticed[noticed.length >> 1];
  const above = (threshold: number) =>
    filled(
      closed(
        Uint8Array.from(difference, (d) => (d > threshold ? 1 : 0)),
        side,
      ),
      side,
    );
  const sure = above(Math.max(noticeable, 0.4 * contrast));
  const perhaps = above(Math.max(noticeable, 0.2 * contrast));
  if (sure.reduce((s, v) => s + v, 0) < leastCovered) return null;
  const hard = Float64Array.from(sure, (v, i) => 0.5 * (v + perhaps[i]));
  const rim = smoothed(hard, side, 1.5);
  let near = perhaps;
  for (let k = 0; k < beyondPx; k++) near = spread(near, side, 1);
  return {
    coverage: smoothed(hard, side, opticsPx),
    u: rim.map((r, i) => (near[i] === 0 ? 0 : uAway + 0.4 * Math.min(r, 1 - r))),
  };
}

/** What the moving frames say of a body, to be weighed with its rest frames. */
export interface MovingMean {
  /** Appearance times coverage [grey levels]. */
  readonly appearance: Float64Array;
  readonly frames: number;
}

/**
 * Appearance times coverage A of a body with coverage α in front of a plate. Rest frames alone give
 * A = S - (1 - α) B + s ∇α·∇B, exact for the background they had; the moving frames' mean makes it right for background in
 * general.
 */
export function coveredAppearance(
  still: StillBody,
  behind: Float64Array,
  coverage: Float64Array,
  spreadPx2: number,
  moving: MovingMean | null,
): Float64Array {
  const share = moving ? moving.frames / (moving.frames + still.frames) : 0;
  const smear = smearOf(coverage, behind, spreadPx2);
  return still.mean.map((s, i) => {
    const atRest = s - (1 - coverage[i]) * behind[i] + smear[i];
    return moving ? atRest + share * (moving.appearance[i] - atRest) : atRest;
  });
}

/** What optics smear from the background into the rim of a body, s ∇α·∇B, on a square window. */
export function smearOf(coverage: Float64Array, behind: Float64Array, spreadPx2: number): Float64Array {
  const side = Math.sqrt(coverage.length);
  const rim = slopesOf(coverage, side, side);
  const board = slopesOf(behind, side, side);
  return coverage.map(
    (_, u) => spreadPx2 * (rim.slopeX[u] * board.slopeX[u] + rim.slopeY[u] * board.slopeY[u]),
  );
}

/** A model from appearance times coverage and coverage, both on the window with its border. */
export function coveredModel(
  half: number,
  appearance: Float64Array,
  coverage: Float64Array,
  spreadPx2: number,
): BodyModel {
  const wide = 2 * (half + REACH) + 1;
  const side = 2 * half + 1;
  const mask = new Float64Array(side * side);
  for (let row = 0; row < side; row++) {
    for (let column = 0; column < side; column++) {
      // Where neither the body nor its edge is, a pixel says nothing of its place.
      let most = 0;
      for (let j = -1; j <= 1; j++) {
        for (let i = -1; i <= 1; i++)
          most = Math.max(most, coverage[(row + REACH + j) * wide + column + REACH + i]);
      }
      mask[row * side + column] = most > 0.01 ? 1 : 0;
    }
  }
  return {
    half,
    appearance: makeLayer(appearance.slice(), half),
    coverage: makeLayer(coverage.slice(), half),
    spreadPx2,
    mask,
  };
}

/** Grey levels of the plate around a whole pixel, as `cutOut` does for a frame. */
export function cutPlate(plate: Plate, centreX: number, centreY: number, reach: number): Float64Array {
  const side = 2 * reach + 1;
  const cut = new Float64Array(side * side);
  for (let row = 0; row < side; row++) {
    const y = Math.min(plate.heightPx - 1, Math.max(0, centreY - reach + row));
    for (let column = 0; column < side; column++) {
      const x = Math.min(plate.widthPx - 1, Math.max(0, centreX - reach + column));
      cut[row * side + column] = plate.level[y * plate.widthPx + x];
    }
  }
  return cut;
}

/** Grows the pixels of a value by one pixel along rows and columns. */
export function spread(mask: Uint8Array, side: number, value: 0 | 1): Uint8Array {
  const out = mask.slice();
  for (let row = 0; row < side; row++) {
    for (let column = 0; column < side; column++) {
      const u = row * side + column;
      if (mask[u] === value) continue;
      const touches =
        (column > 0 && mask[u - 1] === value) ||
        (column < side - 1 && mask[u + 1] === value) ||
        (row > 0 && mask[u - side] === value) ||
        (row < side - 1 && mask[u + side] === value);
      if (touches) out[u] = value;
    }
  }
  return out;
}

function eroded(mask: Uint8Array, side: number): Uint8Array {
  return spread(mask, side, 0);
}

function closed(mask: Uint8Array, side: number): Uint8Array {
  return eroded(spread(mask, side, 1), side);
}

/** Fills holes, and keeps only what hangs together with the place nearest the middle. */
function filled(mask: Uint8Array, side: number): Uint8Array {
  const outside = flood(mask, side, 0, [0, side - 1, side * (side - 1), side * side - 1]);
  const solid = Uint8Array.from(outside, (v) => 1 - v);
  const middle = (side - 1) / 2;
  let start = -1;
  let nearest = Number.POSITIVE_INFINITY;
  for (let u = 0; u < solid.length; u++) {
    if (solid[u] === 0) continue;
    const d = Math.hypot((u % side) - middle, Math.floor(u / side) - middle);
    if (d < nearest) {
      nearest = d;
      start = u;
    }
  }
  return start < 0 ? solid : flood(solid, side, 1, [start]);
}

/** Marks what can be reached from the starts through pixels of the given value. */
function flood(mask: Uint8Array, side: number, value: 0 | 1, starts: readonly number[]): Uint8Array {
  const reached = new Uint8Array(mask.length);
  const open = starts.filter((u) => mask[u] === value);
  for (const u of open) reached[u] = 1;
  for (let u = open.pop(); u !== undefined; u = open.pop()) {
    const column = u % side;
    const next = [
      column > 0 ? u - 1 : -1,
      column < side - 1 ? u + 1 : -1,
      u - side,
      u + side < mask.length ? u + side : -1,
    ];
    for (const v of next) {
      if (v >= 0 && mask[v] === value && reached[v] === 0) {
        reached[v] = 1;
        open.push(v);
      }
    }
  }
  return reached;
}

/** Gaussian blur, separable; beyond the edge the nearest pixel stands in. */
function smoothed(values: Float64Array, side: number, sigmaPx: number): Float64Array {
  const reach = Math.ceil(3 * sigmaPx);
  const kernel = Array.from({ length: 2 * reach + 1 }, (_, i) =>
    Math.exp(-((i - reach) ** 2) / (2 * sigmaPx * sigmaPx)),
  );
  const total = kernel.reduce((s, v) => s + v, 0);
  const along = (from: Float64Array, stride: number, other: number): Float64Array => {
    const out = new Float64Array(from.length);
    for (let line = 0; line < side; line++) {
      for (let i = 0; i < side; i++) {
        let sum = 0;
        for (let k = -reach; k <= reach; k++) {
          sum += kernel[k + reach] * from[line * other + Math.min(side - 1, Math.max(0, i + k)) * stride];
        }
        out[line * other + i * stride] = sum / total;
      }
    }
    return out;
  };
  return along(along(values, 1, side), side, 1);
}
