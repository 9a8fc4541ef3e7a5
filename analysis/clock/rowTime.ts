/**
 * Mid-exposure time of a sensor row: with a rolling shutter row r is exposed r · rowTimeS after row 0.
 *
 * @param frameTimeS  mid-exposure time of row 0 [s]
 * @param rowPx       row of the picture, 0 at the top
 */
export function rowTime(frameTimeS: number, rowPx: number, rowTimeS: number): number {
  return frameTimeS + rowPx * rowTimeS;
}
