import type { Picture } from '../../analysis/track/track.ts';

/** Luma as one byte per pixel, for display: the lowest bits of deeper footage are dropped (value / 2^bitsDropped, floored). */
export function displayBytes(picture: Picture): { bytes: Uint8Array<ArrayBuffer>; bitsDropped: number } {
  const { luma } = picture;
  const bitsDropped = Math.max(0, picture.bitDepth - 8);
  const bytes = new Uint8Array(luma.length);
  for (let i = 0; i < luma.length; i++) bytes[i] = luma[i] >> bitsDropped;
  return { bytes, bitsDropped };
}

/** Luma exactly as coded: one byte per pixel, or two (little endian) where the footage has more than 8 bits. */
export function exactBytes(picture: Picture): Uint8Array<ArrayBuffer> {
  const { luma } = picture;
  if (luma instanceof Uint8Array) return Uint8Array.from(luma);
  const bytes = new Uint8Array(2 * luma.length);
  const view = new DataView(bytes.buffer); // a copy of the array's memory would be big endian on some machines
  for (let i = 0; i < luma.length; i++) view.setUint16(2 * i, luma[i], true);
  return bytes;
}
