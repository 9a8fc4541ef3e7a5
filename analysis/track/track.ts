import type { BodyState } from '../sheet/result.ts';

/** One frame's luma, row by row from the top. Values are as coded: 0 … 2^bitDepth - 1. */
export interface Picture {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly bitDepth: number;
  readonly luma: Uint8Array | Uint16Array;
}

/** A body followed from frame to frame. All arrays have one entry per frame, in ascending frame order. */
export interface Track {
  readonly bodyId: string;
  readonly frame: Int32Array;
  /** Position at mid-exposure [px]; NaN where the state is `lost`. */
  readonly xPx: Float64Array;
  readonly yPx: Float64Array;
  /** Standard uncertainty of the position [px]; NaN where lost. */
  readonly uXPx: Float64Array;
  readonly uYPx: Float64Array;
  /** Zero-normalised cross-correlation of patch and frame, -1 to 1; NaN where lost or manual. */
  readonly score: Float64Array;
  readonly state: readonly BodyState[];
  /**
   * How far the camera had moved in each frame [px], to be taken off before a place is one on the rig; NaN where that was not
   * found. Absent: the camera stood still.
   */
  readonly camera?: { readonly xPx: Float64Array; readonly yPx: Float64Array; readonly uPx: Float64Array };
}

/**
 * Looks for a patch within a radius around a place, to a whole pixel. Passed in by the caller, so that analysis needs no
 * image library.
 */
export type WideSearch = (
  picture: Picture,
  patch: Picture,
  around: { readonly xPx: number; readonly yPx: number },
  radiusPx: number,
) => { readonly xPx: number; readonly yPx: number; readonly score: number } | null;
