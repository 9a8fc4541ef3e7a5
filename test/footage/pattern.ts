import type { Picture } from '../../analysis/track/track.ts';

/**
 * A picture made for these tests alone: a drifting texture that uses the whole range of values, so that any stretching, clipping or
 * mixing up of frames and rows shows. The same n gives the same picture.
 */
export function pattern(n: number, widthPx: number, heightPx: number, bitDepth = 8): Picture {
  const most = 2 ** bitDepth - 1;
  const luma = bitDepth > 8 ? new Uint16Array(widthPx * heightPx) : new Uint8Array(widthPx * heightPx);
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const wave = Math.sin((x + 2 * n) / 7) * Math.cos((y - n) / 11) + Math.sin((x * y) / 97 + n);
      luma[y * widthPx + x] = Math.round((most * (wave + 2)) / 4);
    }
  }
  luma[0] = 0;
  luma[1] = most;
  luma[2] = n & most;
  return { widthPx, heightPx, bitDepth, luma };
}

export function patterns(count: number, widthPx: number, heightPx: number, bitDepth = 8): Picture[] {
  return Array.from({ length: count }, (_, n) => pattern(n, widthPx, heightPx, bitDepth));
}
