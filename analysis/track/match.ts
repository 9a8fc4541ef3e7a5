import { type Box, type Layer, makeSampler, sampledFor, type WindowPoint } from './layer.ts';
import {
  emptyEquations,
  type Fitting,
  fillEquations,
  fillFree,
  fitGainAndOffset,
  leaveOutForeign,
  likeness,
  UNKNOWNS,
} from './normalEquations.ts';
import { makeSymmetricSolver } from './solveSymmetric.ts';
import type { Picture } from './track.ts';

/**
 * What a body looks like, around its own zero (the place that was marked).
 *
 * A frame is modelled as I(x) = g·A(x - p) + o·α(x - p) + γ·[(1 - α(x - p))·B(x) - s·∇α(x - p)·∇B(x)]: appearance times
 * coverage A, coverage α, plate B, gain and offset of the body g and o, brightness of the whole frame γ. Without a plate α is 1
 * and B vanishes. The last term is there because optics smear what the body leaves free of the background, not each by itself:
 * with a point spread of variance s the smeared product of two fields is the product of the smeared ones plus s times that of
 * their slopes (first term of the Gaussian's expansion).
 */
export interface BodyModel {
  readonly half: number;
  /** Appearance times coverage [grey levels]. */
  readonly appearance: Layer;
  /** Coverage 0 … 1; null: everything in the mask is the body. */
  readonly coverage: Layer | null;
  /** Variance of the optics' point spread along one axis, the pixel's own width included [px²]. */
  readonly spreadPx2: number;
  /** Weight of each pixel of the window, 0 … 1; (2 · half + 1)² values. */
  readonly mask: Float64Array;
}

/** The still background behind the bodies [grey levels], same size as the frames; NaN: pixel not to be used. */
export interface Plate {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly level: Float32Array;
  /** Slopes of the level [grey levels per px]. */
  readonly slopeX: Float32Array;
  readonly slopeY: Float32Array;
}

export interface Match {
  /** Place of the body's zero in the picture [px]. */
  readonly xPx: number;
  readonly yPx: number;
  /** Covariance of the place from noise alone: σ² (JᵀWJ)⁻¹ [px²]. */
  readonly varXPx2: number;
  readonly varYPx2: number;
  readonly covXYPx2: number;
  /** Standard deviation of the residual [grey levels]. */
  readonly residual: number;
  /** Zero-normalised cross-correlation of model and frame. */
  readonly score: number;
  /** Contrast of the body in the frame relative to its model. */
  readonly gain: number;
  /** What the residual says of the model's spread: sums of r·t/σ² and t²/σ², where r = Δs·t. */
  readonly spreadPull: number;
  readonly spreadWeight: number;
  /** Share of the mask's weight that lies inside the picture. */
  readonly inside: number;
  readonly converged: boolean;
  /** Turn and growth against the model; 0 where they were not asked for. */
  readonly turnRad: number;
  readonly growth: number;
}

export interface Matcher {
  /**
   * Gauss-Newton for place, gain and offset from a start within a pixel or two. The model is interpolated and compared with
   * the raw pixels of the frame, so the residuals stay white and the Hessian exact (shared limits: 0.97 to 1.1 of the
   * Cramér-Rao bound).
   *
   * @param sigma  expected standard deviation of a pixel's noise [grey levels]; sets where robust weights begin
   * @param turnsAbout  centre of a body that turns: its turn and growth are found too
   * @returns null when the window has too little of the picture or the equations are singular
   */
  match(
    picture: Picture,
    model: BodyModel,
    startXPx: number,
    startYPx: number,
    sigma: number,
    plate: Plate | null,
    brightness: number,
    turnsAbout?: WindowPoint | null,
  ): Match | null;
}

/** Residuals beyond this many standard deviations lose weight (Huber). 2.5 costs 1 % of precision on Gaussian noise. */
const huberAt = 2.5;
/** Beyond this a pixel shows something else (a tether that crosses), which can be told once the match is near. */
const foreignAt = 6;
const nearPx = 0.05;
const recentrePx = 0.7;
const mostSteps = 12;
/** The next step would be shorter than this, or than this share of the place's standard uncertainty. */
const settledPx = 2e-4;
const settledShare = 0.05;
/** Weights can flip for ever; steps this small no longer matter beside the noise. */
const goodEnoughPx = 0.005;
const leastInside = 0.6;
/** Standard deviation of a body's gain about 1, where the pixels do not say better. */
const gainPrior = 0.3;

/** A matcher for models of one window size; holds its buffers. */
export function makeMatcher(half: number): Matcher {
  const side = 2 * half + 1;
  const sampler = makeSampler(half);
  const a = sampledFor(half);
  const c = sampledFor(half);
  const equations = emptyEquations();
  const solver = makeSymmetricSolver(UNKNOWNS);
  const step = new Float64Array(UNKNOWNS);
  const pixel = new Int32Array(side * side);
  const seen = new Float64Array(side * side);
  const behind = new Float64Array(side * side);
  const behindX = new Float64Array(side * side);
  const behindY = new Float64Array(side * side);
  const free = new Float64Array(side * side);
  const foreign = new Uint8Array(side * side);
  let masked: Masked | null = null;

  return {
    match(picture, model, startXPx, startYPx, sigma, plate, brightness, turnsAbout) {
      const { mask, appearance, coverage } = model;
      if (masked?.mask !== mask) masked = maskedBox(mask, side);
      const fitting: Fitting = {
        pixel,
        count: 0,
        seen,
        behind,
        behindX,
        behindY,
        free,
        mask,
        foreign,
        appearance: a,
        coverage: c,
        side,
      };
      const level = { gain: 1, offset: 0 };
      let x = startXPx;
      let y = startYPx;
      let wholeX = Number.NaN;
      let wholeY = Number.NaN;
      let box = masked.box;
      let noise = sigma;
      let lengthPx = Number.POSITIVE_INFINITY;
      let cleared = false;
      if (!coverage) {
        c.value.fill(1);
        c.slopeX.fill(0);
        c.slopeY.fill(0);
      }

      for (let steps = 1; steps <= mostSteps; steps++) {
        // Only a step well over the edge moves the window: at the edge it would go to and fro.
        if (!(Math.abs(x - wholeX) < recentrePx && Math.abs(y - wholeY) < recentrePx)) {
          cleared = false;
          wholeX = Math.round(x);
          wholeY = Math.round(y);
          const left = wholeX - half;
          const top = wholeY - half;
          box = insideOf(masked.box, left, top, picture);
          fitting.count = gather(fitting, picture, plate, brightness, box, left, top);
        }
        const dx = x - wholeX;
        const dy = y - wholeY;
        const centre = turnsAbout ? { x: half + dx + turnsAbout.x, y: half + dy + turnsAbout.y } : null;
        sampler.sample(appearance, dx, dy, a, box);
        if (coverage) sampler.sample(coverage, dx, dy, c, box);
        fillFree(fitting, model.spreadPx2);
        if (steps === 1 && !fitGainAndOffset(fitting, level)) return null;
        fillEquations(fitting, level, huberAt * noise, centre, equations);
        if (!cleared && lengthPx < nearPx) {
          cleared = true;
          if (leaveOutForeign(fitting, level, foreignAt * noise))
            fillEquations(fitting, level, huberAt * noise, centre, equations);
        }

        const { matrix, right, sumW, sumMask } = equations;
        const inside = sumMask / masked.weight;
        if (inside < leastInside || sumW <= 8) return null;
        const variance = equations.sumWR2 / Math.max(sumW - 4, 1);
        noise = Math.max(Math.sqrt(variance), 0.2);
        if (coverage) {
          // A body of one grey cannot tell gain from offset: a weak prior on the gain keeps the equations regular.
          const prior = variance / (gainPrior * gainPrior);
          matrix[12] += prior;
          right[2] += prior * (1 - level.gain);
        }
        if (!solver.invert(matrix)) return null;
        const { inverse } = solver;
        let gained = 0;
        for (let k = 0; k < UNKNOWNS; k++) {
          let sum = 0;
          for (let j = 0; j < UNKNOWNS; j++) sum += inverse[k * UNKNOWNS + j] * right[j];
          step[k] = sum;
          gained += sum * right[k];
        }
        // A step over a pixel leaves the region where the slope is the truth: shorten it, keep its direction.
        const beforePx = lengthPx;
        lengthPx = Math.hypot(step[0], step[1]);
        const shorten = lengthPx > 1 ? 1 / lengthPx : 1;
        x += step[0] * shorten;
        y += step[1] * shorten;
        if (!Number.isFinite(x) || !Number.isFinite(y)) return null;
        // Steps shrink by about the same factor each time: the next one would be this long.
        const nextPx = beforePx === Number.POSITIVE_INFINITY ? lengthPx : lengthPx * (lengthPx / beforePx);
        const enoughPx = Math.max(settledPx, settledShare * Math.sqrt(variance * inverse[0]));
        const converged = cleared && lengthPx < beforePx && nextPx < enoughPx;
        if (converged || steps === mostSteps) {
          const remaining = Math.max(equations.sumWR2 - gained, 0) / Math.max(sumW - 4, 1);
          const { score, spreadPull, spreadWeight } = likeness(fitting, level);
          return {
            xPx: x,
            yPx: y,
            varXPx2: remaining * inverse[0],
            varYPx2: remaining * inverse[UNKNOWNS + 1],
            covXYPx2: remaining * inverse[1],
            residual: Math.sqrt(remaining),
            score,
            spreadPull: spreadPull / remaining,
            spreadWeight: spreadWeight / remaining,
            gain: level.gain + step[2],
            inside,
            converged: converged || lengthPx < goodEnoughPx,
            turnRad: turnsAbout ? step[4] : 0,
            growth: turnsAbout ? step[5] : 0,
          };
        }
        level.gain += step[2];
        level.offset += step[3];
      }
      return null;
    },
  };
}

/** A mask with the least box that holds it and the sum of its weights. */
interface Masked {
  readonly mask: Float64Array;
  readonly box: Box;
  readonly weight: number;
}

function maskedBox(mask: Float64Array, side: number): Masked {
  let [left, top, right, bottom, weight] = [side, side, -1, -1, 0];
  for (let u = 0; u < mask.length; u++) {
    if (mask[u] === 0) continue;
    weight += mask[u];
    left = Math.min(left, u % side);
    right = Math.max(right, u % side);
    top = Math.min(top, Math.floor(u / side));
    bottom = Math.max(bottom, Math.floor(u / side));
  }
  return { mask, box: { left, top, right, bottom }, weight };
}

/** The part of a window's box that lies in the picture. */
function insideOf(box: Box, left: number, top: number, { widthPx, heightPx }: Picture): Box {
  return {
    left: Math.max(box.left, -left),
    top: Math.max(box.top, -top),
    right: Math.min(box.right, widthPx - 1 - left),
    bottom: Math.min(box.bottom, heightPx - 1 - top),
  };
}

/** Collects what the frame and the plate show in the window; returns how many pixels count. */
function gather(
  { pixel, seen, behind, behindX, behindY, mask, side }: Fitting,
  { luma, widthPx }: Picture,
  plate: Plate | null,
  brightness: number,
  box: Box,
  left: number,
  top: number,
): number {
  let count = 0;
  for (let row = box.top; row <= box.bottom; row++) {
    const inPicture = (top + row) * widthPx + left;
    for (let column = box.left; column <= box.right; column++) {
      const u = row * side + column;
      if (mask[u] === 0) continue;
      const b = plate ? brightness * plate.level[inPicture + column] : 0;
      if (Number.isNaN(b)) continue;
      pixel[count++] = u;
      seen[u] = luma[inPicture + column];
      behind[u] = b;
      behindX[u] = plate ? brightness * plate.slopeX[inPicture + column] : 0;
      behindY[u] = plate ? brightness * plate.slopeY[inPicture + column] : 0;
    }
  }
  return count;
}
