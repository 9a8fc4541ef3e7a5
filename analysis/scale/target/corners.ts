import type { Picture } from '../../track/track.ts';
import type { PlanePoint } from '../planePoint.ts';

const ringPx = 5;
const ring = Array.from({ length: 16 }, (_, k) => ({
  x: Math.round(ringPx * Math.cos((k * Math.PI) / 8)),
  y: Math.round(ringPx * Math.sin((k * Math.PI) / 8)),
}));
/** Of the strongest response in the picture. */
const leastShare = 0.35;

/**
 * Rough places of a chessboard's inner corners: on a ring of 16 pixels around one, opposite pixels are alike and those a quarter
 * turn apart are not (S. Bennett & J. Lasenby, ChESS, Comput. Vis. Image Underst. 118, 2014, eq. 1 to 4). Largest within its ring.
 */
export function roughCorners({ widthPx, heightPx, luma }: Picture): PlanePoint[] {
  const response = new Float64Array(widthPx * heightPx);
  const offsets = ring.map((o) => o.y * widthPx + o.x);
  let strongest = 0;
  for (let y = ringPx; y < heightPx - ringPx; y++) {
    for (let x = ringPx; x < widthPx - ringPx; x++) {
      const at = y * widthPx + x;
      let [alike, unlike, sum] = [0, 0, 0];
      for (let k = 0; k < 8; k++) {
        const [a, b] = [luma[at + offsets[k]], luma[at + offsets[k + 8]]];
        unlike += Math.abs(a - b);
        sum += a + b;
        if (k < 4) alike += Math.abs(a + b - luma[at + offsets[k + 4]] - luma[at + offsets[k + 12]]);
      }
      const near = (luma[at] + luma[at - 1] + luma[at + 1] + luma[at - widthPx] + luma[at + widthPx]) / 5;
      const value = alike - unlike - 16 * Math.abs(sum / 16 - near);
      response[at] = value;
      if (value > strongest) strongest = value;
    }
  }
  const found: PlanePoint[] = [];
  for (let y = ringPx; y < heightPx - ringPx; y++) {
    for (let x = ringPx; x < widthPx - ringPx; x++) {
      const value = response[y * widthPx + x];
      if (value > leastShare * strongest && isLargest(response, widthPx, x, y, value)) found.push({ x, y });
    }
  }
  return found;
}

/** Whether no place of the ring's square is larger; of equals the first counts. */
function isLargest(response: Float64Array, widthPx: number, x: number, y: number, value: number): boolean {
  for (let j = -ringPx; j <= ringPx; j++) {
    for (let i = -ringPx; i <= ringPx; i++) {
      const other = response[(y + j) * widthPx + x + i];
      if (other > value || (other === value && (j < 0 || (j === 0 && i < 0)))) return false;
    }
  }
  return true;
}
