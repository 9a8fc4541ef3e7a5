import type { Picture } from '../../track/track.ts';
import type { PlanePoint } from '../planePoint.ts';

/** Darker than its surroundings by this share of their range counts as a dot. */
const darkerBy = 0.25;
const leastPixels = 12;

/** Rough centres of dark dots on a light ground: connected pixels darker than the mean around them, about as round as an ellipse. */
export function roughDots({ widthPx, heightPx, luma, bitDepth }: Picture): PlanePoint[] {
  const around = Math.max(12, Math.round(Math.min(widthPx, heightPx) / 12));
  const mean = localMean(luma, widthPx, heightPx, around);
  const limit = darkerBy * contrastOf(luma, 2 ** bitDepth);
  const dark = Uint8Array.from(luma, (v, i) => (v < mean[i] - limit / 2 ? 1 : 0));
  const found: PlanePoint[] = [];
  const stack: number[] = [];
  for (let start = 0; start < dark.length; start++) {
    if (dark[start] !== 1) continue;
    let [n, sx, sy, sxx, sxy, syy] = [0, 0, 0, 0, 0, 0];
    let cut = false;
    dark[start] = 2;
    stack.push(start);
    for (let at = stack.pop(); at !== undefined; at = stack.pop()) {
      const [x, y] = [at % widthPx, Math.floor(at / widthPx)];
      n++;
      sx += x;
      sy += y;
      sxx += x * x;
      sxy += x * y;
      syy += y * y;
      if (x === 0 || y === 0 || x === widthPx - 1 || y === heightPx - 1) {
        cut = true;
        continue;
      }
      for (const next of [at - 1, at + 1, at - widthPx, at + widthPx]) {
        if (dark[next] !== 1) continue;
        dark[next] = 2;
        stack.push(next);
      }
    }
    if (cut || n < leastPixels || n > around * around * 4) continue;
    const [mx, my] = [sx / n, sy / n];
    const [xx, xy, yy] = [sxx / n - mx * mx, sxy / n - mx * my, syy / n - my * my];
    const spread = Math.sqrt(Math.max(0, xx * yy - xy * xy));
    // Of a filled ellipse the root of the determinant of its second moments is its area over 4π.
    const filled = n / (4 * Math.PI * spread);
    if (filled > 0.85 && filled < 1.2 && spread > 0.3 * (xx + yy) * 0.5) found.push({ x: mx, y: my });
  }
  return found;
}

function contrastOf(luma: Picture['luma'], levels: number): number {
  const counts = new Float64Array(256);
  for (const v of luma) counts[Math.floor((v * 256) / levels)]++;
  const at = (share: number) => {
    let sum = 0;
    const bin = counts.findIndex((c) => {
      sum += c;
      return sum >= share * luma.length;
    });
    return (bin * levels) / 256;
  };
  return at(0.98) - at(0.02);
}

function localMean(luma: Picture['luma'], widthPx: number, heightPx: number, around: number): Float64Array {
  const sums = new Float64Array((widthPx + 1) * (heightPx + 1));
  const side = widthPx + 1;
  for (let y = 0; y < heightPx; y++) {
    let row = 0;
    for (let x = 0; x < widthPx; x++) {
      row += luma[y * widthPx + x];
      sums[(y + 1) * side + x + 1] = sums[y * side + x + 1] + row;
    }
  }
  return Float64Array.from({ length: widthPx * heightPx }, (_, i) => {
    const [x, y] = [i % widthPx, Math.floor(i / widthPx)];
    const [x0, x1] = [Math.max(0, x - around), Math.min(widthPx, x + around + 1)];
    const [y0, y1] = [Math.max(0, y - around), Math.min(heightPx, y + around + 1)];
    const sum = sums[y1 * side + x1] - sums[y0 * side + x1] - sums[y1 * side + x0] + sums[y0 * side + x0];
    return sum / ((x1 - x0) * (y1 - y0));
  });
}
