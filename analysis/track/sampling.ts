import type { Picture } from './track.ts';

export interface SampledFrame {
  readonly n: number;
  readonly picture: Picture;
}

/** Frames kept of footage whose length is not known beforehand, evenly spread, at bounded memory. */
export interface Sampling {
  push(n: number, picture: Picture): void;
  readonly frames: readonly SampledFrame[];
}

/**
 * Keeps every s-th frame; when there are too many, every second of those is dropped and s doubled. In the end between half of
 * `most` and `most` frames are left, spread over the whole footage.
 */
export function startSampling(most: number): Sampling {
  let stride = 1;
  let frames: SampledFrame[] = [];
  return {
    push(n, picture) {
      if (n % stride !== 0) return;
      frames.push({ n, picture: { ...picture, luma: picture.luma.slice() } });
      if (frames.length > most) {
        stride *= 2;
        frames = frames.filter((f) => f.n % stride === 0);
      }
    },
    get frames() {
      return frames;
    },
  };
}
