import { REACH } from './layer.ts';
import type { StillBody } from './learnBody.ts';
import { cutOut, halfOf } from './patchModel.ts';
import { smallShift } from './smallShift.ts';
import type { Picture } from './track.ts';

/** Watches a body from the frame in which it was placed, for as long as it rests. */
export interface Rest {
  /** The next frame; false once the body has moved or enough was seen. */
  push(picture: Picture): boolean;
  still(): StillBody;
}

/** More rest frames than this no longer make the mean better: its noise is a tenth of a frame's. */
const mostFrames = 100;
/** The last frames before a movement is noticed may already move by less than that: they are not used. */
const heldBack = 4;
/** A movement by less than this is not told from noise in any footage [px]. */
const movedPx = 0.03;
/** Rounding to whole grey levels alone is a noise of 1/√12. */
const leastNoise = 0.3;

/**
 * @param first  the frame in which the body was placed
 * @param noise  standard deviation of a pixel's noise there [grey levels]
 */
export function startRest(first: Picture, xPx: number, yPx: number, patchPx: number, noise: number): Rest {
  const half = halfOf(patchPx);
  const centreX = Math.round(xPx);
  const centreY = Math.round(yPx);
  const shiftOf = smallShift(first, centreX, centreY, half, noise);
  const sum = cutOut(first, centreX, centreY, half + REACH);
  let frames = 1;
  let moving = false;
  let waiting: Float64Array[] = [];

  return {
    push(picture) {
      if (moving || frames + waiting.length >= mostFrames) return false;
      const shift = shiftOf(picture);
      moving = Math.abs(shift.x) > movedPx + 4 * shift.uX || Math.abs(shift.y) > movedPx + 4 * shift.uY;
      if (moving) return false;
      waiting = [...waiting, cutOut(picture, centreX, centreY, half + REACH)];
      if (waiting.length > heldBack) {
        const [oldest, ...rest] = waiting;
        for (let u = 0; u < sum.length; u++) sum[u] += oldest[u];
        frames++;
        waiting = rest;
      }
      return true;
    },
    still() {
      return {
        centreX,
        centreY,
        half,
        mean: sum.map((v) => v / frames),
        frames,
        noise: Math.max(noise, leastNoise),
      };
    },
  };
}
