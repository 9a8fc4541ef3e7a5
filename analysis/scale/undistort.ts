import type { Sheet } from '../sheet/sheet.ts';

export type Lens = NonNullable<NonNullable<Sheet['camera']>['lens']>;

/** Where a place in the picture would be without the lens's radial distortion (Brown 1971; model and sign as in the contract). */
export function undistort(xPx: number, yPx: number, lens: Lens | undefined): { xPx: number; yPx: number } {
  if (!lens) return { xPx, yPx };
  const dx = xPx - lens.centre.x;
  const dy = yPx - lens.centre.y;
  const r2 = (dx * dx + dy * dy) / (lens.radiusPx * lens.radiusPx);
  const factor = 1 + lens.k1 * r2 + lens.k2 * r2 * r2;
  return { xPx: lens.centre.x + dx * factor, yPx: lens.centre.y + dy * factor };
}
