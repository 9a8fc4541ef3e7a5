import { createHash } from 'node:crypto';
import type { Picture } from '../../analysis/track/track.ts';

/** A picture's values as one short text: two pictures have the same values if these are the same. */
export function lumaDigest({ luma }: Pick<Picture, 'luma'>): string {
  const bytes = new Uint8Array(luma.buffer, luma.byteOffset, luma.byteLength);
  return `${luma.length} × ${luma.BYTES_PER_ELEMENT}: ${createHash('sha1').update(bytes).digest('hex')}`;
}
