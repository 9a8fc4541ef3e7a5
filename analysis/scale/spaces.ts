/** A place in the picture [px]: x right, y down, integer at pixel centres. */
export interface PixelPoint {
  readonly space: 'pixel';
  readonly xPx: number;
  readonly yPx: number;
}

/** A place in the plane of motion [m]: x right, y up. Only `scale/` makes one out of a PixelPoint. */
export interface WorldPoint {
  readonly space: 'world';
  readonly xM: number;
  readonly yM: number;
}
