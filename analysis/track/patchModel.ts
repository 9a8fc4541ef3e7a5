import { makeLayer, REACH } from './layer.ts';
import type { BodyModel } from './match.ts';
import type { Picture } from './track.ts';

/** Half the side of the window for a stated patch: the patch's side becomes odd, so that it has a middle pixel. */
export function halfOf(patchPx: number): number {
  return Math.max(2, Math.round((patchPx - 1) / 2));
}

/** Round window with a soft rim of two pixels: the corners of a square patch mostly show background. */
export function roundMask(half: number): Float64Array {
  const side = 2 * half + 1;
  const mask = new Float64Array(side * side);
  for (let y = -half; y <= half; y++) {
    for (let x = -half; x <= half; x++) {
      const rim = (half + 0.5 - Math.hypot(x, y)) / 2;
      mask[(y + half) * side + x + half] = Math.min(1, Math.max(0, rim));
    }
  }
  return mask;
}

/** Grey levels around a whole pixel, (2 · reach + 1)² of them; beyond the picture's edge the nearest pixel stands in. */
export function cutOut(picture: Picture, centreX: number, centreY: number, reach: number): Float64Array {
  const { widthPx, heightPx, luma } = picture;
  const side = 2 * reach + 1;
  const cut = new Float64Array(side * side);
  for (let row = 0; row < side; row++) {
    const y = Math.min(heightPx - 1, Math.max(0, centreY - reach + row));
    for (let column = 0; column < side; column++) {
      const x = Math.min(widthPx - 1, Math.max(0, centreX - reach + column));
      cut[row * side + column] = luma[y * widthPx + x];
    }
  }
  return cut;
}

/** A body's model from one frame, without a plate: the patch as it is, in a round window. Its zero is the whole pixel given. */
export function patchModel(picture: Picture, centreX: number, centreY: number, half: number): BodyModel {
  return {
    half,
    appearance: makeLayer(cutOut(picture, centreX, centreY, half + REACH), half),
    coverage: null,
    spreadPx2: 0,
    mask: roundMask(half),
  };
}
