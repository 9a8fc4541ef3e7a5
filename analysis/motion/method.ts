/**
 * One coordinate of a body along one piece of the record: no break (release, extension) lies inside it.
 * Arrays of equal length; times strictly increase, steps may be uneven.
 */
export interface Piece {
  readonly timeS: Float64Array;
  readonly valueM: Float64Array;
  /** Stated standard uncertainty of each position, frame by frame [m]. */
  readonly uM: Float64Array;
  /** The instant before the piece at which the body was still at rest, if it starts there, and the place where it was. */
  readonly restUntil: Rest | null;
  /** The body hangs at rest all along: the piece before release. */
  readonly atRest?: boolean;
}

export interface Rest {
  readonly timeS: number;
  readonly uTimeS: number;
  readonly valueM: number;
  readonly uValueM: number;
}

/** Values and standard uncertainties at the piece's times; NaN where the method has none. */
export interface Curve {
  readonly value: Float64Array;
  /** With the noise of the positions, their correlation as the residuals show it, and the bias of smoothing. */
  readonly u: Float64Array;
}

/** What a method makes of a piece. */
export interface Smoothed {
  readonly position: Curve;
  readonly velocity: Curve;
  readonly acceleration: Curve;
  /** Where the method can give it [m/s³]. */
  readonly jerk: Curve | null;
  /** Frequency up to which the acceleration is passed, at each instant [Hz]. */
  readonly bandwidthHz: Float64Array;
  /** How it was done, for the record: windows, cut-off, chosen by what. */
  readonly settings: Readonly<Record<string, unknown>>;
}

/** A way to turn positions into velocity and acceleration: the default, or one that a procedure prescribes. */
export interface MotionMethod {
  /** In words, for the record. */
  readonly name: string;
  /** Throws RangeError when the piece has no points or its times do not increase. */
  smooth(piece: Piece): Smoothed;
}
