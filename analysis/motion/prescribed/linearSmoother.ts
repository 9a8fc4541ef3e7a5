/** The three or four quantities of a curve at each instant of a piece; NaN where there is none. */
export interface Derivatives {
  readonly position: Float64Array;
  readonly velocity: Float64Array;
  readonly acceleration: Float64Array;
  readonly jerk: Float64Array | null;
}

/** A method with all its settings fixed on the times of one piece: from there on every value is a weighted sum of positions. */
export interface LinearSmoother {
  /** The same weights on any values at the piece's times: on the positions, and on a better curve to see what the weights do to it. */
  apply(values: Float64Array): Derivatives;
  /** Standard uncertainties from the stated ones of the positions, uncorrelated, through the weights. */
  readonly uNoise: Derivatives;
  /** Frequency up to which the acceleration passes within 3 dB, at each instant [Hz]. */
  readonly bandwidthHz: Float64Array;
  readonly settings: Readonly<Record<string, unknown>>;
}
