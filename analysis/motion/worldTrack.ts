/**
 * The positions of one body that count as data (measured and manual frames only), in the plane of motion.
 * All arrays have equal length; times strictly increase.
 */
export interface WorldTrack {
  readonly bodyId: string;
  readonly role: 'tip' | 'reference' | 'other';
  readonly frame: Int32Array;
  /** Mid-exposure time of the row where the body is [s]. */
  readonly timeS: Float64Array;
  readonly xM: Float64Array;
  readonly yM: Float64Array;
  /** Standard uncertainty of each position from tracking alone [m]; what is common to all frames is in `Common`. */
  readonly uXM: Float64Array;
  readonly uYM: Float64Array;
}

/** A relative standard uncertainty common to all frames, by its source. */
export interface RelativeSource {
  readonly source: string;
  readonly uRel: number;
  /**
   * For a source that does not stretch all lengths alike: where a place goes with each independent part of it at +1 standard
   * uncertainty; uRel then holds from the highest to the lowest place. `analysis/scale/displacement.ts` says what it makes of a
   * value elsewhere.
   */
  readonly moves?: readonly ((place: { readonly xM: number; readonly yM: number }) => {
    readonly xM: number;
    readonly yM: number;
  })[];
}

/** What all positions and times of a reduction share: it does not average out over frames. */
export interface Common {
  /** Relative uncertainties of lengths: bar length, bar marks, plane offset … */
  readonly length: readonly RelativeSource[];
  /** Relative uncertainties of time intervals: capture rate … */
  readonly time: readonly RelativeSource[];
  /** Standard uncertainty of the direction of down [rad]. */
  readonly uDownRad: number;
  /** Time from frame to frame, median [s]; exposure [s]. */
  readonly frameTimeS: number;
  readonly exposureS: number;
  /** Metres in one pixel at the picture's centre. */
  readonly metrePerPx: number;
}
