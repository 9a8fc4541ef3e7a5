import { createHash } from 'node:crypto';
import type { Picture } from '../../../analysis/track/track.ts';
import type { FootageIndex, FrameSource } from '../../../main/footage/frameSource.ts';

/** Footage that is in memory already, so that the time of following is not mixed with the time of decoding. */
export function memoryFootage(pictures: readonly Picture[]): FrameSource {
  const [{ widthPx, heightPx, bitDepth }] = pictures;
  const hashes = pictures.map(({ luma }) => createHash('sha1').update(luma).digest('hex'));
  const index: FootageIndex = {
    frameCount: pictures.length,
    widthPx,
    heightPx,
    bitDepth,
    pts: pictures.map((_, n) => n),
    timeBase: { num: 1, den: 30 },
    sha256: createHash('sha256').update(hashes.join()).digest('hex'),
    frameHashes: hashes,
    codec: 'none',
    pixelFormat: 'grey',
    rotationDeg: 0,
    lumaRule: 'grey',
    bitsPerPixel: bitDepth,
    findings: [],
  };
  return {
    path: 'memory',
    backend: { name: 'memory', version: '1' },
    async index({ onFrame } = {}) {
      pictures.forEach((picture, n) => {
        onFrame?.({ n, picture }, pictures.length);
      });
      return index;
    },
    async *frames(first, last) {
      for (let n = first; n <= last; n++) yield { n, picture: pictures[n] };
    },
    async frame(n) {
      return pictures[n];
    },
    async close() {},
  };
}
