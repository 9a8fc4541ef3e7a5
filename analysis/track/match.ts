import { type Layer, makeSampler, sampledFor } from './layer.ts';
import type { Picture } from './track.ts';

/**
 * What a body looks like, around its own zero (the place that was marked).
 *
 * A frame is modelled as I(x) = g·A(x - p) + o·α(x - p) + γ·(1 - α(x - p))·B(x): appearance times coverage A, coverage α,
 * plate B, gain and offset of the body g and o, brightness of the whole frame γ. Without a plate α is 1 and B vanishes.
 */
export interface BodyModel {
  readonly half: number;
  /** Appearance times coverage [grey levels]. */
  readonly appearance: Layer;
  /** Coverage 0 … 1; null: everything in the mask is the body. */
  readonly coverage: Layer | null;
  /** Weight of each pixel of the window, 0 … 1; (2 · half + 1)² values. */
  readonly mask: Float64Array;
}

/** The still background behind the bodies [grey levels], same size as the frames; NaN: pixel not to be used. */
export interface Plate {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly level: Float32Array;
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
  /** Share of the mask's weight that lies inside the picture. */
  readonly inside: number;
  readonly converged: boolean;
}

export interface Matcher {
  /**
   * Gauss-Newton for place, gain and offset from a start within a pixel or two. The model is interpolated and compared with
   * the raw pixels of the frame, so the residuals stay white and the Hessian exact (shared limits: 0.97 to 1.1 of the
   * Cramér-Rao bound).
   *
   * @param sigma  expected standard deviation of a pixel's noise [grey levels]; sets where robust weights begin
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
  ): Match | null;
}

/** Residuals beyond this many standard deviations lose weight (Huber). 2.5 costs 1 % of precision on Gaussian noise. */
const huberAt = 2.5;
/** Beyond this a pixel shows something else (a tether that crosses) and counts for nothing, once the match is near. */
const rejectAt = 6;
const mostSteps = 12;
const settledPx = 2e-4;
/** Weights at the edge of rejection can flip for ever; steps this small no longer matter beside the noise. */
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
  const normal = new Float64Array(16);
  const right = new Float64Array(4);

  return {
    match(picture, model, startXPx, startYPx, sigma, plate, brightness) {
      const { widthPx, heightPx, luma } = picture;
      const { mask, appearance, coverage } = model;
      let x = startXPx;
      let y = startYPx;
      let gain = 1;
      let offset = 0;
      let noise = sigma;
      let converged = false;
      let lastStepPx = Number.POSITIVE_INFINITY;
      let answer: Match | null = null;
      if (!coverage) {
        c.value.fill(1);
        c.slopeX.fill(0);
        c.slopeY.fill(0);
      }

      for (let step = 0; step <= mostSteps; step++) {
        const wholeX = Math.round(x);
        const wholeY = Math.round(y);
        sampler.sample(appearance, x - wholeX, y - wholeY, a);
        if (coverage) sampler.sample(coverage, x - wholeX, y - wholeY, c);
        const fromX = Math.max(0, half - wholeX);
        const toX = Math.min(side - 1, widthPx - 1 - wholeX + half);
        const fromY = Math.max(0, half - wholeY);
        const toY = Math.min(side - 1, heightPx - 1 - wholeY + half);
        if (step === 0) {
          const start = gainAndOffset(
            picture,
            plate,
            brightness,
            mask,
            a.value,
            c.value,
            side,
            wholeX - half,
            wholeY - half,
            fromX,
            toX,
            fromY,
            toY,
          );
          if (!start) return null;
          ({ gain, offset } = start);
        }

        normal.fill(0);
        right.fill(0);
        let sumW = 0;
        let sumMask = 0;
        let sumWR2 = 0;
        let sumI = 0;
        let sumM = 0;
        let sumII = 0;
        let sumMM = 0;
        let sumIM = 0;
        for (let row = fromY; row <= toY; row++) {
          const pictureRow = (wholeY - half + row) * widthPx + wholeX - half;
          for (let column = fromX; column <= toX; column++) {
            const u = row * side + column;
            const m = mask[u];
            if (m === 0) continue;
            const behind = plate ? brightness * plate.level[pictureRow + column] : 0;
            if (Number.isNaN(behind)) continue;
            const seen = luma[pictureRow + column];
            const av = a.value[u];
            const cv = c.value[u];
            const modelled = gain * av + offset * cv + (1 - cv) * behind;
            const r = seen - modelled;
            const size = r < 0 ? -r : r;
            const w =
              size <= huberAt * noise
                ? m
                : step > 1 && size > rejectAt * noise
                  ? 0
                  : (m * huberAt * noise) / size;
            const lift = offset - behind;
            const jx = -(gain * a.slopeX[u] + lift * c.slopeX[u]);
            const jy = -(gain * a.slopeY[u] + lift * c.slopeY[u]);
            normal[0] += w * jx * jx;
            normal[1] += w * jx * jy;
            normal[2] += w * jx * av;
            normal[3] += w * jx * cv;
            normal[5] += w * jy * jy;
            normal[6] += w * jy * av;
            normal[7] += w * jy * cv;
            normal[10] += w * av * av;
            normal[11] += w * av * cv;
            normal[15] += w * cv * cv;
            right[0] += w * jx * r;
            right[1] += w * jy * r;
            right[2] += w * av * r;
            right[3] += w * cv * r;
            sumW += w;
            sumMask += m;
            sumWR2 += w * r * r;
            sumI += m * seen;
            sumM += m * modelled;
            sumII += m * seen * seen;
            sumMM += m * modelled * modelled;
            sumIM += m * seen * modelled;
          }
        }
        let whole = 0;
        for (let u = 0; u < mask.length; u++) whole += mask[u];
        const inside = sumMask / whole;
        if (inside < leastInside || sumW <= 8) return null;
        const variance = sumWR2 / Math.max(sumW - 4, 1);
        noise = Math.max(Math.sqrt(variance), 0.2);
        if (coverage) {
          // A body of one grey cannot tell gain from offset: a weak prior on the gain keeps the equations regular.
          const prior = variance / (gainPrior * gainPrior);
          normal[10] += prior;
          right[2] += prior * (1 - gain);
        }
        const inverse = invertSymmetric4(normal);
        if (!inverse) return null;
        if (converged || step === mostSteps) {
          const varI = sumII - (sumI * sumI) / sumMask;
          const varM = sumMM - (sumM * sumM) / sumMask;
          const cov = sumIM - (sumI * sumM) / sumMask;
          answer = {
            xPx: x,
            yPx: y,
            varXPx2: variance * inverse[0],
            varYPx2: variance * inverse[5],
            covXYPx2: variance * inverse[1],
            residual: Math.sqrt(variance),
            score: varI > 0 && varM > 0 ? cov / Math.sqrt(varI * varM) : 0,
            gain,
            inside,
            converged: converged || lastStepPx < goodEnoughPx,
          };
          break;
        }
        let stepX = 0;
        let stepY = 0;
        for (let k = 0; k < 4; k++) {
          stepX += inverse[k] * right[k];
          stepY += inverse[4 + k] * right[k];
          gain += inverse[8 + k] * right[k];
          offset += inverse[12 + k] * right[k];
        }
        // A step over a pixel leaves the region where the slope is the truth: shorten it, keep its direction.
        const length = Math.hypot(stepX, stepY);
        const shorten = length > 1 ? 1 / length : 1;
        x += stepX * shorten;
        y += stepY * shorten;
        if (!Number.isFinite(x) || !Number.isFinite(y)) return null;
        lastStepPx = length;
        converged = length < settledPx;
      }
      return answer;
    },
  };
}

/** Least squares of frame ≈ g·A + o·α + (1 - α)·γB at the start; null if fewer than nine pixels count. */
function gainAndOffset(
  picture: Picture,
  plate: Plate | null,
  brightness: number,
  mask: Float64Array,
  a: Float64Array,
  c: Float64Array,
  side: number,
  left: number,
  top: number,
  fromX: number,
  toX: number,
  fromY: number,
  toY: number,
): { gain: number; offset: number } | null {
  let aa = 0;
  let ac = 0;
  let cc = 0;
  let ai = 0;
  let ci = 0;
  let count = 0;
  for (let row = fromY; row <= toY; row++) {
    const pictureRow = (top + row) * picture.widthPx + left;
    for (let column = fromX; column <= toX; column++) {
      const u = row * side + column;
      const m = mask[u];
      if (m === 0) continue;
      const behind = plate ? brightness * plate.level[pictureRow + column] : 0;
      if (Number.isNaN(behind)) continue;
      const seen = picture.luma[pictureRow + column] - (1 - c[u]) * behind;
      aa += m * a[u] * a[u];
      ac += m * a[u] * c[u];
      cc += m * c[u] * c[u];
      ai += m * a[u] * seen;
      ci += m * c[u] * seen;
      count++;
    }
  }
  const det = aa * cc - ac * ac;
  if (count < 9 || det <= 1e-9 * aa * cc) return null;
  return { gain: (ai * cc - ci * ac) / det, offset: (ci * aa - ai * ac) / det };
}

/** Inverse of a symmetric positive definite 4 × 4 matrix given by its upper triangle; null if it is not. Gauss-Jordan. */
function invertSymmetric4(upper: Float64Array): Float64Array | null {
  const m = new Float64Array(32);
  for (let i = 0; i < 4; i++) {
    for (let j = 0; j < 4; j++) m[i * 8 + j] = i <= j ? upper[i * 4 + j] : upper[j * 4 + i];
    m[i * 8 + 4 + i] = 1;
  }
  for (let i = 0; i < 4; i++) {
    const pivot = m[i * 8 + i];
    if (!(pivot > 1e-12 * upper[i * 5])) return null;
    for (let j = i; j < 8; j++) m[i * 8 + j] /= pivot;
    for (let k = 0; k < 4; k++) {
      if (k === i) continue;
      const factor = m[k * 8 + i];
      if (factor !== 0) for (let j = i; j < 8; j++) m[k * 8 + j] -= factor * m[i * 8 + j];
    }
  }
  const inverse = new Float64Array(16);
  for (let i = 0; i < 4; i++) for (let j = 0; j < 4; j++) inverse[i * 4 + j] = m[i * 8 + 4 + j];
  return inverse;
}
