import { REACH } from './layer.ts';
import { smearOf } from './learnBody.ts';
import type { Plate } from './match.ts';
import { quinticCoefficients, quinticWeights, TAPS, TAPS_BEFORE } from './spline.ts';
import type { Picture } from './track.ts';

/**
 * Learns how much of each pixel a body covers from the frames in which it passes over different background: over known
 * backgrounds B_i a pixel of the body shows I_i = A + (1 - α) B_i, a straight line whose slope is 1 - α (triangulation
 * matting, Smith & Blinn, SIGGRAPH 1996, 259), once what the optics smear in is taken off.
 */
export interface Matting {
  /** One frame in which the body's zero is at (xPx, yPx); `rim`: what is known of its coverage, and the point spread. */
  add(picture: Picture, plate: Plate, brightness: number, xPx: number, yPx: number, rim: Rim): void;
  readonly frames: number;
  /** The frame about the body's zero, and the plate there, of the frame added or looked at last. */
  /** The frame, what the optics smear in taken off. */
  readonly seen: Float64Array;
  readonly behind: Float64Array;
  /** Only looks: fills `seen` and `behind`; false when the window reaches out of the picture. */
  look(picture: Picture, plate: Plate, brightness: number, xPx: number, yPx: number, rim: Rim): boolean;
  /**
   * Coverage on the window with its border: the slope weighed against the first guess by how well the background told it.
   *
   * @param uGuess  standard deviation of the first guess at each pixel
   * @param noise   standard deviation of a pixel's noise [grey levels]
   */
  coverage(guess: Float64Array, uGuess: Float64Array, noise: number): Float64Array;
  /** Appearance times coverage as the frames show it on average: mean I - (1 - α) mean B. */
  appearance(coverage: Float64Array): Float64Array;
}

/** Coverage as it is known, and the variance of the point spread that smears over its rim. */
interface Rim {
  readonly coverage: Float64Array;
  readonly spreadPx2: number;
}

export function startMatting(half: number): Matting {
  const outer = half + REACH;
  const side = 2 * outer + 1;
  const reach = outer + REACH;
  const wide = 2 * reach + 1;
  const n = side * side;
  const b = new Float64Array(n);
  const bb = new Float64Array(n);
  const i1 = new Float64Array(n);
  const ib = new Float64Array(n);
  const cut = new Float64Array(wide * wide);
  const cutB = new Float64Array(wide * wide);
  const seen = new Float64Array(n);
  const behind = new Float64Array(n);
  let frames = 0;

  const look = (
    picture: Picture,
    plate: Plate,
    brightness: number,
    xPx: number,
    yPx: number,
    { coverage, spreadPx2 }: Rim,
  ): boolean => {
    const cx = Math.round(xPx);
    const cy = Math.round(yPx);
    if (cx - reach < 0 || cy - reach < 0 || cx + reach >= picture.widthPx || cy + reach >= picture.heightPx)
      return false;
    for (let row = 0; row < wide; row++) {
      const from = (cy - reach + row) * picture.widthPx + cx - reach;
      for (let column = 0; column < wide; column++) {
        cut[row * wide + column] = picture.luma[from + column] / brightness;
        cutB[row * wide + column] = plate.level[from + column];
      }
    }
    resample(cut, wide, xPx - cx, yPx - cy, seen, side);
    resample(cutB, wide, xPx - cx, yPx - cy, behind, side);
    const smear = smearOf(coverage, behind, spreadPx2);
    for (let u = 0; u < n; u++) seen[u] += smear[u];
    return true;
  };

  return {
    seen,
    behind,
    look,
    add(picture, plate, brightness, xPx, yPx, rim) {
      if (!look(picture, plate, brightness, xPx, yPx, rim)) return;
      for (let u = 0; u < n; u++) {
        b[u] += behind[u];
        bb[u] += behind[u] * behind[u];
        i1[u] += seen[u];
        ib[u] += seen[u] * behind[u];
      }
      frames++;
    },
    get frames() {
      return frames;
    },
    coverage(guess, uGuess, noise) {
      const alpha = guess.slice();
      if (frames < 2) return alpha;
      for (let u = 0; u < n; u++) {
        if (uGuess[u] === 0) continue; // well outside: stays background
        const sBB = bb[u] - (b[u] * b[u]) / frames;
        const sIB = ib[u] - (i1[u] * b[u]) / frames;
        const information = sBB / (noise * noise);
        const prior = 1 / (uGuess[u] * uGuess[u]);
        const told = information > 0 ? 1 - sIB / sBB : guess[u];
        alpha[u] = Math.min(1, Math.max(0, (prior * guess[u] + information * told) / (prior + information)));
      }
      return alpha;
    },
    appearance(coverage) {
      return Float64Array.from(coverage, (alpha, u) => (i1[u] - (1 - alpha) * b[u]) / frames);
    },
  };
}

/** Samples a cut-out at whole steps from a fractional place; the cut-out is consumed. */
function resample(
  cut: Float64Array,
  wide: number,
  dx: number,
  dy: number,
  into: Float64Array,
  side: number,
): void {
  quinticCoefficients(cut, wide, wide);
  const wx = new Float64Array(TAPS);
  const wy = new Float64Array(TAPS);
  const unused = new Float64Array(TAPS);
  const wholeX = Math.floor(dx);
  const wholeY = Math.floor(dy);
  quinticWeights(dx - wholeX, wx, unused);
  quinticWeights(dy - wholeY, wy, unused);
  const margin = (wide - side) / 2;
  const rows = new Float64Array(wide * side);
  for (let row = 0; row < wide; row++) {
    for (let column = 0; column < side; column++) {
      let sum = 0;
      const from = row * wide + column + margin + wholeX - TAPS_BEFORE;
      for (let k = 0; k < TAPS; k++) sum += wx[k] * cut[from + k];
      rows[row * side + column] = sum;
    }
  }
  for (let row = 0; row < side; row++) {
    for (let column = 0; column < side; column++) {
      let sum = 0;
      const from = (row + margin + wholeY - TAPS_BEFORE) * side + column;
      for (let k = 0; k < TAPS; k++) sum += wy[k] * rows[from + k * side];
      into[row * side + column] = sum;
    }
  }
}
