import type { FootageInput } from './footageInput.ts';

/** What a decoder says about the first video stream after it has decoded one frame. */
export interface StreamFacts {
  readonly codec: string;
  /** libavutil's name of the decoded format. */
  readonly pixelFormat: string;
  /** Size as coded, before rotation. */
  readonly widthPx: number;
  readonly heightPx: number;
  readonly timeBase: { readonly num: number; readonly den: number };
  /** By how much the picture is to be turned clockwise for display, 0 ≤ angle < 360; null where it is no quarter turn. */
  readonly clockwiseDeg: 0 | 90 | 180 | 270 | null;
  readonly videoStreamCount: number;
  /** The container's start and length [s], where it gives them. */
  readonly startS: number;
  readonly durationS: number | null;
  readonly frameRateHz: number | null;
}

/** One decoded frame as it travels (see PixelLayout). */
export interface DecodedFrame {
  readonly pts: number | null;
  /** Predicted from a later frame, so that decode order and display order differ. */
  readonly bidirectional: boolean;
  /** Valid until the next frame is asked for. */
  readonly bytes: Uint8Array;
}

/** How a decoding came to its end. */
export interface DecodeEnd {
  /** The decoder's or demuxer's first complaint, null where there was none. */
  readonly complaint: string | null;
  /** The size or pixel format changed: decoding stopped there. */
  readonly changed: string | null;
}

export interface DecodeOrder {
  readonly input: FootageInput;
  readonly facts: StreamFacts;
  /** Where to begin: at a frame counted from the start, or at the first frame whose pts is not below a value (by seeking). */
  readonly from: { readonly frame: number } | { readonly pts: number };
  /** How many frames at most; Infinity for all. */
  readonly count: number;
  readonly signal: AbortSignal;
}

/**
 * A program or library that decodes. All of them give the same frames, so what follows from frames (luma, rotation, times,
 * trust) is written once, in decodedFootage.ts.
 */
export interface Decoder {
  readonly name: string;
  readonly version: string;
  /** @throws Refusal (status 3) where there is no video to decode */
  describe(input: FootageInput, signal: AbortSignal): Promise<StreamFacts>;
  /** Leaving the loop early ends the decoder. */
  decode(order: DecodeOrder): AsyncGenerator<DecodedFrame, DecodeEnd>;
  /**
   * Decodes again, on one thread, and counts the frames that can be trusted: those that came out before the decoder's first
   * complaint, and no more than packets were read before the demuxer's first complaint.
   */
  framesBeforeComplaint(order: DecodeOrder): Promise<number>;
  /** Ends what the decoder keeps running between decodings. */
  close(): Promise<void>;
}
