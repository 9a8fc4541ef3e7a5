import type { Plate } from './match.ts';
import type { Picture } from './track.ts';

/** The part of one frame around a body, and of the plate behind it. */
interface Cutting {
  readonly picture: Picture;
  readonly plate: Plate | null;
  readonly brightness: number;
  /** The frame's pixel that is the cutting's (0, 0). */
  readonly left: number;
  readonly top: number;
}

/** Parts of the first frames, kept so that they can be matched again when more is known of the body. */
export interface Cuttings {
  /** Keeps the part of frame n around (xPx, yPx), as long as there is room. */
  keep(n: number, picture: Picture, plate: Plate | null, brightness: number, xPx: number, yPx: number): void;
  /** The kept cuttings that belong to measured sightings, each with the sighting's index. */
  /** Takes pixels of the frame (1 in `mask`, side × side about a whole pixel) out of every kept plate. */
  disregard(centreX: number, centreY: number, side: number, mask: Uint8Array): void;
  of(sightings: readonly { readonly n: number; readonly state: string }[]): [number, Cutting][];
}

/** Room for one body's cuttings [bytes]: a thousand frames of a usual patch. */
const roomBytes = 128 * 1024 * 1024;
/** Pixels around the window: a body's place may still move by this much, and its model reaches a little further. */
const margin = 10;

export function startCuttings(half: number): Cuttings {
  const kept = new Map<number, Cutting>();
  let usedBytes = 0;
  return {
    keep(n, picture, plate, brightness, xPx, yPx) {
      if (usedBytes > roomBytes) return;
      const left = Math.max(0, Math.round(xPx) - half - margin);
      const top = Math.max(0, Math.round(yPx) - half - margin);
      const right = Math.min(picture.widthPx - 1, Math.round(xPx) + half + margin);
      const bottom = Math.min(picture.heightPx - 1, Math.round(yPx) + half + margin);
      if (right <= left || bottom <= top) return;
      const widthPx = right - left + 1;
      const heightPx = bottom - top + 1;
      const luma =
        picture.luma instanceof Uint8Array
          ? new Uint8Array(widthPx * heightPx)
          : new Uint16Array(widthPx * heightPx);
      const part = (whole: Float32Array) => {
        const cut = new Float32Array(widthPx * heightPx);
        for (let row = 0; row < heightPx; row++) {
          const from = (top + row) * picture.widthPx + left;
          cut.set(whole.subarray(from, from + widthPx), row * widthPx);
        }
        return cut;
      };
      for (let row = 0; row < heightPx; row++) {
        const from = (top + row) * picture.widthPx + left;
        luma.set(picture.luma.subarray(from, from + widthPx), row * widthPx);
      }
      usedBytes += luma.byteLength + (plate ? 3 * 4 * widthPx * heightPx : 0);
      kept.set(n, {
        picture: { widthPx, heightPx, bitDepth: picture.bitDepth, luma },
        plate: plate && {
          widthPx,
          heightPx,
          level: part(plate.level),
          slopeX: part(plate.slopeX),
          slopeY: part(plate.slopeY),
        },
        brightness,
        left,
        top,
      });
    },
    disregard(centreX, centreY, side, mask) {
      const reach = (side - 1) / 2;
      for (const { plate: part, left, top } of kept.values()) {
        if (!part) continue;
        for (let u = 0; u < mask.length; u++) {
          const x = centreX - reach + (u % side) - left;
          const y = centreY - reach + Math.floor(u / side) - top;
          if (mask[u] === 1 && x >= 0 && y >= 0 && x < part.widthPx && y < part.heightPx)
            part.level[y * part.widthPx + x] = Number.NaN;
        }
      }
    },
    of(sightings) {
      return sightings.flatMap((s, i): [number, Cutting][] => {
        const cut = s.state === 'measured' ? kept.get(s.n) : undefined;
        return cut ? [[i, cut]] : [];
      });
    },
  };
}
