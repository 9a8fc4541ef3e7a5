import type { Picture } from '../../track/track.ts';

/** The pixels within a radius of a whole pixel, with their places from it. */
export interface Window {
  readonly centreX: number;
  readonly centreY: number;
  readonly halfPx: number;
  readonly dx: Float64Array;
  readonly dy: Float64Array;
  /** Luma in 8-bit grey levels, so that limits do not depend on the bit depth. */
  readonly grey: Float64Array;
}

/** @returns null where the picture has fewer than half of the pixels of the disc */
export function windowAt(picture: Picture, x: number, y: number, halfPx: number): Window | null {
  const [centreX, centreY] = [Math.round(x), Math.round(y)];
  const { widthPx, heightPx, luma } = picture;
  const perGrey = 2 ** (picture.bitDepth - 8);
  const [dx, dy, grey]: [number[], number[], number[]] = [[], [], []];
  const reach = (halfPx + 0.5) ** 2;
  let wanted = 0;
  for (let j = -halfPx; j <= halfPx; j++) {
    for (let i = -halfPx; i <= halfPx; i++) {
      if (i * i + j * j > reach) continue;
      wanted++;
      const [px, py] = [centreX + i, centreY + j];
      if (px < 0 || py < 0 || px >= widthPx || py >= heightPx) continue;
      dx.push(i);
      dy.push(j);
      grey.push(luma[py * widthPx + px] / perGrey);
    }
  }
  if (grey.length < wanted / 2) return null;
  return {
    centreX,
    centreY,
    halfPx,
    dx: Float64Array.from(dx),
    dy: Float64Array.from(dy),
    grey: Float64Array.from(grey),
  };
}

/**
 * Noise of single pixels about a place [grey levels]: what is left by the difference of second differences along rows and columns,
 * which smooth shading and straight edges along either do not enter (Immerkær 1996); the median, so that the target does not count.
 */
export function pixelNoise(picture: Picture, x: number, y: number, halfPx: number): number {
  const { widthPx, heightPx, luma } = picture;
  const perGrey = 2 ** (picture.bitDepth - 8);
  const found: number[] = [];
  const [cx, cy] = [Math.round(x), Math.round(y)];
  for (let py = Math.max(1, cy - halfPx); py <= Math.min(heightPx - 2, cy + halfPx); py++) {
    for (let px = Math.max(1, cx - halfPx); px <= Math.min(widthPx - 2, cx + halfPx); px++) {
      const at = (i: number, j: number) => luma[(py + j) * widthPx + px + i];
      const corners = at(-1, -1) + at(1, -1) + at(-1, 1) + at(1, 1);
      const sides = at(0, -1) + at(-1, 0) + at(1, 0) + at(0, 1);
      found.push(Math.abs(corners - 2 * sides + 4 * at(0, 0)));
    }
  }
  found.sort((a, b) => a - b);
  // The mask has norm 6; the median of |normal| is 0.6745 σ. Rounding to whole levels is noise too.
  const byMask = (found[found.length >> 1] ?? 0) / (6 * 0.6745 * perGrey);
  return Math.max(byMask, Math.sqrt(1 / 12) / perGrey);
}
