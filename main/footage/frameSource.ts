import type { Finding } from '../../analysis/sheet/result.ts';
import type { Picture } from '../../analysis/track/track.ts';

/** What is known about a piece of footage once it has been decoded from end to end. */
export interface FootageIndex {
  /** Frames that can be trusted, in decode order of display: frame numbers run from 0 to frameCount - 1. */
  readonly frameCount: number;
  /** Size as displayed (rotation metadata applied). */
  readonly widthPx: number;
  readonly heightPx: number;
  /** Significant bits of a luma value (8 to 16). */
  readonly bitDepth: number;
  /** Presentation time of each frame as the file's own integer, null where the file gives none. Time [s] = pts · num / den. */
  readonly pts: readonly (number | null)[];
  readonly timeBase: { readonly num: number; readonly den: number };
  /** SHA-256 of the file's bytes; of a numbered sequence: of its files' names and bytes in order. */
  readonly sha256: string;
  /** A hash of each frame's luma (for finding frames that were doubled, and for comparing backends). */
  readonly frameHashes: readonly string[];
  readonly codec: string;
  readonly pixelFormat: string;
  readonly rotationDeg: 0 | 90 | 180 | 270;
  /** How luma was had: the coded Y plane, or the stated conversion from RGB. */
  readonly lumaRule: 'coded' | 'rgb-bt601' | 'grey';
  readonly bitsPerPixel: number;
  readonly findings: readonly Finding[];
}

export interface NumberedPicture {
  readonly n: number;
  /** Valid until the next frame is asked for; copy what must last. */
  readonly picture: Picture;
}

/**
 * Footage opened for reading. Frames are luma exactly as coded, rotated as displayed. Errors a user can cause are thrown
 * as Refusal with status 3.
 */
export interface FrameSource {
  readonly path: string;
  readonly backend: { readonly name: string; readonly version: string };
  /**
   * Decodes everything once, forward, and keeps the answer: a second call is free. `onFrame` sees each frame as it comes
   * (only during the first call); `expectedCount` is the container's claim, null if it makes none.
   */
  index(options?: {
    readonly signal?: AbortSignal;
    readonly onFrame?: (frame: NumberedPicture, expectedCount: number | null) => void;
  }): Promise<FootageIndex>;
  /** Frames first … last (inclusive) in order. Needs no index. Leaving the loop early ends the decoder. */
  frames(first: number, last: number, signal?: AbortSignal): AsyncIterable<NumberedPicture>;
  /** Exactly frame n, from a bounded cache where it can. The picture is the caller's to keep. */
  frame(n: number, signal?: AbortSignal): Promise<Picture>;
  /** Ends every process and removes every temporary file. */
  close(): Promise<void>;
}

/** One way to decode. Every file in `backends/` exports one of these; `backends/all.ts` lists them in order of preference. */
export interface FootageBackend {
  readonly name: string;
  /** The backend's version if it can be used on this machine, else null. Never throws. */
  probe(): Promise<string | null>;
  open(path: string): Promise<FrameSource>;
}
