import type { FootageIndex, FrameSource } from '../../main/footage/frameSource.ts';

/** Footage in memory: frame n holds the value n + 1 in every pixel, times 257 where it is 16 bits deep. */
export interface FakeFootage extends FrameSource {
  closed: boolean;
}

export interface FakeOptions {
  readonly frameCount?: number;
  readonly bitDepth?: number;
  readonly pts?: readonly (number | null)[];
  /** Waited for before each single frame. */
  readonly beforeSingleFrame?: () => Promise<void>;
  /** Waited for before each frame of the index; rejects when the index is aborted. */
  readonly beforeFrame?: (n: number, signal: AbortSignal | undefined) => Promise<void>;
}

const fakeSize = { widthPx: 4, heightPx: 3 } as const;

export function fakeFootage(path: string, options: FakeOptions = {}): FakeFootage {
  const { frameCount = 5, bitDepth = 8, beforeFrame } = options;
  const pts = options.pts ?? Array.from({ length: frameCount }, (_, n) => n * 512);
  const picture = (n: number) => {
    const length = fakeSize.widthPx * fakeSize.heightPx;
    const luma =
      bitDepth > 8 ? new Uint16Array(length).fill((n + 1) * 257) : new Uint8Array(length).fill(n + 1);
    return { ...fakeSize, bitDepth, luma };
  };
  const index: FootageIndex = {
    ...fakeSize,
    frameCount,
    bitDepth,
    pts,
    timeBase: { num: 1, den: 12800 },
    sha256: 'f'.repeat(64),
    frameHashes: [],
    codec: 'rawvideo',
    pixelFormat: 'gray',
    rotationDeg: 0,
    lumaRule: 'coded',
    bitsPerPixel: bitDepth,
    findings: [{ level: 'note', code: 'made', text: 'Made for a test.' }],
  };
  const source: FakeFootage = {
    path,
    closed: false,
    backend: { name: 'memory', version: '1' },
    async index({ signal, onFrame } = {}) {
      for (let n = 0; n < frameCount; n++) {
        await beforeFrame?.(n, signal);
        signal?.throwIfAborted();
        onFrame?.({ n, picture: picture(n) }, frameCount);
      }
      return index;
    },
    async *frames(first, last) {
      for (let n = first; n <= last; n++) yield { n, picture: picture(n) };
    },
    async frame(n) {
      await options.beforeSingleFrame?.();
      return picture(n);
    },
    async close() {
      source.closed = true;
    },
  };
  return source;
}
