/** A place in a plane that is not yet the plane of motion: undistorted pixels, or the fiducials' own coordinates. */
export interface PlanePoint {
  readonly x: number;
  readonly y: number;
}
