import type { Picture } from '../../analysis/track/track.ts';
import type { StreamFacts } from './decoder.ts';
import type { PixelLayout } from './pixelLayout.ts';
import { rgbLuma } from './rgbLuma.ts';
import { rotate } from './rotate.ts';

/**
 * Turns a frame as it travels into its luma as displayed. The picture's array is used again for the next frame.
 *
 * @returns a function from the decoder's bytes (one frame, its buffer aligned to 2) to the picture
 */
export function pictureMaker(layout: PixelLayout, facts: StreamFacts): (bytes: Uint8Array) => Picture {
  const pixelCount = facts.widthPx * facts.heightPx;
  const turn = facts.clockwiseDeg ?? 0;
  const lying = turn === 90 || turn === 270;
  const converted = layout.transport === 'luma' ? null : samples(layout, pixelCount);
  const turned = turn === 0 ? null : samples(layout, pixelCount);
  const size = {
    widthPx: lying ? facts.heightPx : facts.widthPx,
    heightPx: lying ? facts.widthPx : facts.heightPx,
    bitDepth: layout.bitDepth,
  };
  return (bytes) => {
    let luma = layout.bytesPerSample === 1 ? bytes : wide(bytes);
    if (converted !== null) {
      rgbLuma(luma, layout.transport === 'rgbPacked', converted);
      luma = converted;
    }
    if (turned !== null && turn !== 0) {
      rotate(luma, facts.widthPx, facts.heightPx, turn, turned);
      luma = turned;
    }
    return { ...size, luma };
  };
}

function samples(layout: PixelLayout, count: number): Uint8Array | Uint16Array {
  return layout.bytesPerSample === 1 ? new Uint8Array(count) : new Uint16Array(count);
}

/** Samples of two bytes travel little-endian, as every machine this runs on stores them. */
function wide(bytes: Uint8Array): Uint16Array {
  return new Uint16Array(bytes.buffer, bytes.byteOffset, bytes.byteLength / 2);
}
