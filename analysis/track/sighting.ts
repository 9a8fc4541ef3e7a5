import type { BodyState } from '../sheet/result.ts';

/** A body as it was placed. */
export interface PlacedBody {
  readonly id: string;
  readonly frame: number;
  readonly xPx: number;
  readonly yPx: number;
  readonly patchPx: number;
  /** Places set by hand in later frames; they win. */
  readonly marks: readonly { readonly frame: number; readonly xPx: number; readonly yPx: number }[];
  /** Standard uncertainty of a place set by hand [px]. */
  readonly uMarkPx: number;
}

/** Where a body was found in one frame. */
export interface Sighting {
  readonly n: number;
  readonly state: BodyState;
  readonly xPx: number;
  readonly yPx: number;
  readonly uXPx: number;
  readonly uYPx: number;
  readonly score: number;
}

/** Below this the patch is not the body, whatever the light. */
export const leastScore = 0.5;

/** A body out of sight for longer is lost: what comes back may be another. */
export const longestGap = 20;
