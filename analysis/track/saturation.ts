import type { Picture } from './track.ts';

/** More of a body than this at the end of the range hides its shape. */
const mostShare = 0.1;

/**
 * Share of a patch's pixels at the largest level that the picture has, if that looks like the end of the sensor's range: many
 * pixels share it exactly. Null where it is small enough not to matter.
 */
export function saturatedShare(
  picture: Picture,
  centreX: number,
  centreY: number,
  half: number,
): number | null {
  const { widthPx, heightPx, luma, bitDepth } = picture;
  let highest = 0;
  for (let i = 0; i < luma.length; i++) if (luma[i] > highest) highest = luma[i];
  let at = 0;
  let all = 0;
  for (let y = Math.max(0, centreY - half); y <= Math.min(heightPx - 1, centreY + half); y++) {
    for (let x = Math.max(0, centreX - half); x <= Math.min(widthPx - 1, centreX + half); x++) {
      if (Math.hypot(x - centreX, y - centreY) > half + 0.5) continue;
      all++;
      if (luma[y * widthPx + x] === highest) at++;
    }
  }
  // Video that keeps to the limited range ends at 235 of 255; below that a flat white is a white thing.
  const endOfRange = highest >= (235 / 255) * (2 ** bitDepth - 1);
  return endOfRange && at / all > mostShare ? at / all : null;
}
