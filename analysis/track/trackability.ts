import type { Picture } from './track.ts';

export type Trackability =
  | { readonly ok: true; readonly noise: number }
  | { readonly ok: false; readonly reason: 'featureless' | 'edgeOnly' };

/** Scale of the smoothed derivatives [px]. */
const s = 1.5;
const taps = 4;

/**
 * Can a patch be followed? Structure tensor of Gaussian-smoothed slopes over the round window, held against what noise alone
 * would give: the variance of such a slope from white noise σ is σ²/(8π s⁴).
 *
 * @param half  half side of the window [px]
 */
export function trackability(picture: Picture, centreX: number, centreY: number, half: number): Trackability {
  const { widthPx, heightPx, luma } = picture;
  const g = Float64Array.from({ length: 2 * taps + 1 }, (_, i) => Math.exp(-((i - taps) ** 2) / (2 * s * s)));
  const sum = g.reduce((t, v) => t + v, 0);
  const noise = noiseOf(picture, centreX, centreY, half + 2);
  let xx = 0;
  let xy = 0;
  let yy = 0;
  let count = 0;
  for (let y = Math.max(taps, centreY - half); y <= Math.min(heightPx - 1 - taps, centreY + half); y++) {
    for (let x = Math.max(taps, centreX - half); x <= Math.min(widthPx - 1 - taps, centreX + half); x++) {
      if (Math.hypot(x - centreX, y - centreY) > half + 0.5) continue;
      let dx = 0;
      let dy = 0;
      for (let j = -taps; j <= taps; j++) {
        for (let i = -taps; i <= taps; i++) {
          const w = (g[i + taps] * g[j + taps]) / (sum * sum * s * s);
          const v = luma[(y + j) * widthPx + x + i];
          dx += i * w * v;
          dy += j * w * v;
        }
      }
      xx += dx * dx;
      xy += dx * dy;
      yy += dy * dy;
      count++;
    }
  }
  if (count === 0) return { ok: false, reason: 'featureless' };
  const mean = (xx + yy) / 2;
  const spread = Math.hypot((xx - yy) / 2, xy);
  const [strong, weak] = [(mean + spread) / count, (mean - spread) / count];
  const fromNoise = (noise * noise) / (8 * Math.PI * s ** 4);
  // Four times the noise's own share; the quarter of a level keeps a perfectly flat picture from passing.
  const needed = 4 * fromNoise + (0.25 * 0.25) / count;
  if (strong < needed) return { ok: false, reason: 'featureless' };
  if (weak < needed) return { ok: false, reason: 'edgeOnly' };
  return { ok: true, noise };
}

/** Standard deviation of the pixels' noise by the Laplacian difference mask (Immerkær, CVIU 64 (1996) 300), median of |·|. */
function noiseOf(picture: Picture, centreX: number, centreY: number, reach: number): number {
  const { widthPx, heightPx, luma } = picture;
  const sizes: number[] = [];
  for (let y = Math.max(1, centreY - reach); y <= Math.min(heightPx - 2, centreY + reach); y++) {
    for (let x = Math.max(1, centreX - reach); x <= Math.min(widthPx - 2, centreX + reach); x++) {
      const at = y * widthPx + x;
      const up = at - widthPx;
      const down = at + widthPx;
      const laplacian =
        luma[up - 1] -
        2 * luma[up] +
        luma[up + 1] -
        2 * luma[at - 1] +
        4 * luma[at] -
        2 * luma[at + 1] +
        luma[down - 1] -
        2 * luma[down] +
        luma[down + 1];
      sizes.push(Math.abs(laplacian));
    }
  }
  sizes.sort((a, b) => a - b);
  // The mask's own standard deviation is 6 σ; the median of |N(0, 1)| is 0.6745.
  return (sizes[sizes.length >> 1] ?? 0) / (6 * 0.6745);
}
