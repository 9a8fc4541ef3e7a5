import type { Motion } from '../sheet/result.ts';
import type { Curve } from './method.ts';

/** Motion of one body with what belongs to each of its points. */
export interface BodyMotion {
  readonly motion: Motion;
  /** Bandwidth of the acceleration along the plumb line at each point [Hz]. */
  readonly bandwidthHz: Float64Array;
  /** Rate of change of that acceleration [m/s³]; NaN where the method has none. */
  readonly jerkY: Curve;
}
