import type { Motion } from '../sheet/result.ts';

/** Motion of one body with what belongs to each of its points. */
export interface BodyMotion {
  readonly motion: Motion;
  /** Bandwidth of the acceleration along the plumb line at each point [Hz]. */
  readonly bandwidthHz: Float64Array;
}
