import type { Picture } from '../../analysis/track/track.ts';

/** Displacement of a body since the reference frame [px], in each frame after it in which it was found. */
export type Places = { readonly n: number; readonly dx: number; readonly dy: number }[];

/**
 * Where OpenCV finds a body in the frames after a reference frame: normalised cross-correlation with a parabola through its
 * peak, and pyramidal Lucas-Kanade from the reference, started at the whole pixel of the former. Neither knows of the track.
 *
 * @param start  the body in the reference frame, to about a pixel
 */
export async function openCvPlaces(
  pictures: readonly Picture[],
  start: { readonly x: number; readonly y: number; readonly patchPx: number; readonly n: number },
): Promise<{ templateMatch: Places; opticalFlow: Places }> {
  // The module has a `then` of its own: it must never be awaited or returned as it is.
  const { cv } = await import('opencv-wasm');
  const matOf = ({ widthPx, heightPx, luma }: Picture) => {
    const mat = new cv.Mat(heightPx, widthPx, cv.CV_8U);
    mat.data.set(luma);
    return mat;
  };
  const half = Math.floor(start.patchPx / 2);
  const side = 2 * half + 1;
  const [left, top] = [Math.round(start.x) - half, Math.round(start.y) - half];
  const first = matOf(pictures[start.n]);
  const template = first.roi(new cv.Rect(left, top, side, side));
  const none = new cv.Mat();
  // No body here moves farther from frame to frame [px].
  const margin = 12;
  const size = side + 2 * margin;
  const reference = first.roi(new cv.Rect(left - margin, top - margin, size, size));
  const before = cv.matFromArray(1, 1, cv.CV_32FC2, [half + margin, half + margin]);

  /** Displacement with the best score within a few pixels of the one before. */
  const matched = (frame: InstanceType<typeof cv.Mat>, { dx, dy }: { dx: number; dy: number }) => {
    const scores = new cv.Mat();
    const fromX = Math.max(0, left + Math.round(dx) - margin);
    const fromY = Math.max(0, top + Math.round(dy) - margin);
    const toX = Math.min(frame.cols, left + Math.round(dx) + margin + side);
    const toY = Math.min(frame.rows, top + Math.round(dy) + margin + side);
    const region = frame.roi(new cv.Rect(fromX, fromY, toX - fromX, toY - fromY));
    cv.matchTemplate(region, template, scores, cv.TM_CCOEFF_NORMED, none);
    const { x, y } = cv.minMaxLoc(scores, none).maxLoc;
    const at = (i: number, j: number) => scores.floatAt(y + j, x + i);
    const vertex = (a: number, b: number, c: number) => (a - c) / (2 * (a - 2 * b + c));
    const found = {
      dx: fromX + x - left + vertex(at(-1, 0), at(0, 0), at(1, 0)),
      dy: fromY + y - top + vertex(at(0, -1), at(0, 0), at(0, 1)),
    };
    region.delete();
    scores.delete();
    return found;
  };

  /** Displacement by Lucas-Kanade between a window about the reference and one moved by whole pixels. */
  const flowed = (frame: InstanceType<typeof cv.Mat>, { dx, dy }: { dx: number; dy: number }) => {
    const [wholeX, wholeY] = [Math.round(dx), Math.round(dy)];
    const window = frame.roi(new cv.Rect(left - margin + wholeX, top - margin + wholeY, size, size));
    const after = new cv.Mat();
    const status = new cv.Mat();
    const error = new cv.Mat();
    const criteria = new cv.TermCriteria(cv.TermCriteria_COUNT + cv.TermCriteria_EPS, 40, 1e-4);
    const patch = new cv.Size(side, side);
    cv.calcOpticalFlowPyrLK(reference, window, before, after, status, error, patch, 2, criteria);
    const found = {
      dx: wholeX + after.data32F[0] - (half + margin),
      dy: wholeY + after.data32F[1] - (half + margin),
      ok: status.data[0] === 1,
    };
    for (const mat of [window, after, status, error]) mat.delete();
    return found;
  };

  const templateMatch: Places = [];
  const opticalFlow: Places = [];
  let match = { dx: 0, dy: 0 };
  for (let n = start.n + 1; n < pictures.length; n++) {
    const frame = matOf(pictures[n]);
    match = matched(frame, match);
    templateMatch.push({ n, ...match });
    const { ok, ...next } = flowed(frame, match);
    if (ok) opticalFlow.push({ n, ...next });
    frame.delete();
  }
  for (const mat of [template, reference, first, none, before]) mat.delete();
  return { templateMatch, opticalFlow };
}
