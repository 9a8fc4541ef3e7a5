type Samples = Uint8Array | Uint16Array;

/**
 * Luma of RGB samples, the same for every backend and depth: Y = floor((299 R + 587 G + 114 B + 500) / 1000) on the coded
 * values, full range (weights of Rec. ITU-R BT.601). Grey pixels keep their value exactly.
 *
 * @param rgb    pixelCount RGB triples if packed; all R, then all G, then all B if not
 * @param out    pixelCount values, filled
 */
export function rgbLuma(rgb: Samples, packed: boolean, out: Samples): void {
  const pixelCount = out.length;
  const step = packed ? 3 : 1;
  const toG = packed ? 1 : pixelCount;
  const toB = packed ? 2 : 2 * pixelCount;
  for (let i = 0, at = 0; i < pixelCount; i++, at += step) {
    const y = 299 * (rgb[at] ?? 0) + 587 * (rgb[at + toG] ?? 0) + 114 * (rgb[at + toB] ?? 0);
    out[i] = ((y + 500) / 1000) | 0;
  }
}
