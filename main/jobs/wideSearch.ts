import type { Picture, WideSearch } from '../../analysis/track/track.ts';

/**
 * Loads OpenCV (WebAssembly) and makes the wide search with it: zero-normalised cross-correlation over all whole-pixel places.
 * Only for worker threads: the library sets process-wide error handlers when it loads.
 */
export async function loadWideSearch(): Promise<WideSearch> {
  // The module has a `then` of its own: it must never be awaited or returned as it is.
  const { cv } = await import('opencv-wasm');

  const matOf = (picture: Picture, left: number, top: number, widthPx: number, heightPx: number) => {
    const mat = new cv.Mat(heightPx, widthPx, cv.CV_32F);
    const data = mat.data32F;
    for (let row = 0; row < heightPx; row++) {
      const from = (top + row) * picture.widthPx + left;
      for (let column = 0; column < widthPx; column++)
        data[row * widthPx + column] = picture.luma[from + column];
    }
    return mat;
  };

  return (picture, patch, around, radiusPx) => {
    const halfX = (patch.widthPx - 1) / 2;
    const halfY = (patch.heightPx - 1) / 2;
    const left = Math.max(0, Math.round(around.xPx - radiusPx - halfX));
    const top = Math.max(0, Math.round(around.yPx - radiusPx - halfY));
    const right = Math.min(picture.widthPx - 1, Math.round(around.xPx + radiusPx + halfX));
    const bottom = Math.min(picture.heightPx - 1, Math.round(around.yPx + radiusPx + halfY));
    if (right - left + 1 < patch.widthPx || bottom - top + 1 < patch.heightPx) return null;

    const region = matOf(picture, left, top, right - left + 1, bottom - top + 1);
    const wanted = matOf(patch, 0, 0, patch.widthPx, patch.heightPx);
    const scores = new cv.Mat();
    const none = new cv.Mat();
    try {
      cv.matchTemplate(region, wanted, scores, cv.TM_CCOEFF_NORMED, none);
      const best = cv.minMaxLoc(scores, none);
      return { xPx: left + best.maxLoc.x + halfX, yPx: top + best.maxLoc.y + halfY, score: best.maxVal };
    } finally {
      for (const mat of [region, wanted, scores, none]) mat.delete();
    }
  };
}
