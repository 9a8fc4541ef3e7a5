import { cutOut } from './patchModel.ts';
import type { Picture } from './track.ts';

/** Scale of the smoothed slopes [px]: wide enough that a single frame's noise does not pass for slope. */
const s = 1.5;
const taps = 4;

export interface SmallShift {
  readonly x: number;
  readonly y: number;
  readonly uX: number;
  readonly uY: number;
}

/**
 * Shift of a patch by a fraction of a pixel against the frame it was cut from, by one linear step with Gaussian-smoothed
 * slopes. Unlike an interpolated match it has no pull away from zero when the first frame is noisy: interpolation smooths the
 * patch's noise, which makes a match half a pixel off look better than it is.
 *
 * @returns the shift of a frame [px] with its standard uncertainty from noise
 */
export function smallShift(
  first: Picture,
  centreX: number,
  centreY: number,
  half: number,
  noise: number,
): (picture: Picture) => SmallShift {
  const side = 2 * half + 1;
  const reach = half + taps;
  const wide = 2 * reach + 1;
  const from = cutOut(first, centreX, centreY, reach);
  const slopeX = new Float64Array(side * side);
  const slopeY = new Float64Array(side * side);
  const g = Float64Array.from({ length: 2 * taps + 1 }, (_, i) => Math.exp(-((i - taps) ** 2) / (2 * s * s)));
  const total = g.reduce((t, v) => t + v, 0) ** 2 * s * s;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let row = 0; row < side; row++) {
    for (let column = 0; column < side; column++) {
      if (Math.hypot(row - half, column - half) > half + 0.5) continue;
      let dx = 0;
      let dy = 0;
      for (let j = -taps; j <= taps; j++) {
        for (let i = -taps; i <= taps; i++) {
          const v = g[i + taps] * g[j + taps] * from[(row + taps + j) * wide + column + taps + i];
          dx += i * v;
          dy += j * v;
        }
      }
      const u = row * side + column;
      slopeX[u] = dx / total;
      slopeY[u] = dy / total;
      xx += slopeX[u] ** 2;
      xy += slopeX[u] * slopeY[u];
      yy += slopeY[u] ** 2;
    }
  }
  const det = xx * yy - xy * xy;
  const uX = Math.SQRT2 * noise * Math.sqrt(yy / det);
  const uY = Math.SQRT2 * noise * Math.sqrt(xx / det);
  return (picture) => {
    const now = cutOut(picture, centreX, centreY, half);
    let bx = 0;
    let by = 0;
    for (let row = 0; row < side; row++) {
      for (let column = 0; column < side; column++) {
        const u = row * side + column;
        const difference = from[(row + taps) * wide + column + taps] - now[u];
        bx += slopeX[u] * difference;
        by += slopeY[u] * difference;
      }
    }
    return { x: (yy * bx - xy * by) / det, y: (xx * by - xy * bx) / det, uX, uY };
  };
}
