type Samples = Uint8Array | Uint16Array;

/**
 * Turns a picture clockwise by a quarter, half or three quarters of a turn.
 *
 * @param from  widthPx · heightPx values, row by row
 * @param out   as many values, filled; its rows are heightPx long after a quarter turn
 */
export function rotate(
  from: Samples,
  widthPx: number,
  heightPx: number,
  clockwiseDeg: 90 | 180 | 270,
  out: Samples,
): void {
  const last = widthPx * heightPx - 1;
  if (clockwiseDeg === 180) {
    for (let i = 0; i <= last; i++) out[i] = from[last - i] ?? 0;
    return;
  }
  // a quarter turn sends column x to row x, read upwards; three quarters send it to row widthPx - 1 - x, read downwards
  let at = 0;
  for (let row = 0; row < widthPx; row++) {
    const x = clockwiseDeg === 90 ? row : widthPx - 1 - row;
    const start = clockwiseDeg === 90 ? (heightPx - 1) * widthPx + x : x;
    const step = clockwiseDeg === 90 ? -widthPx : widthPx;
    for (let k = 0, i = start; k < heightPx; k++, i += step) out[at++] = from[i] ?? 0;
  }
}
