import type { Finding } from '../../analysis/sheet/result.ts';
import { halfOf } from '../../analysis/track/patchModel.ts';
import { saturatedShare } from '../../analysis/track/saturation.ts';
import type { PlacedBody } from '../../analysis/track/sighting.ts';
import type { Picture } from '../../analysis/track/track.ts';

/** Bodies that are too bright to show their shape. */
export function saturationFindings(
  bodies: readonly { readonly placed: PlacedBody; readonly first: Picture | null }[],
): Finding[] {
  return bodies.flatMap(({ placed, first }): Finding[] => {
    const share =
      first && saturatedShare(first, Math.round(placed.xPx), Math.round(placed.yPx), halfOf(placed.patchPx));
    if (!share) return [];
    const text = `Body ${placed.id}: ${(100 * share).toFixed(0)} % of its patch is as bright as the camera can show, so its shape is hidden there. Expose less or light less.`;
    return [{ level: 'caution', code: 'bodySaturated', text }];
  });
}

/** Most frames that are named one by one. */
const mostNamed = 5;

/** Frames that copy the one before. */
export function doubledFindings(frames: readonly number[]): Finding[] {
  if (frames.length === 0) return [];
  const which = frames.slice(0, mostNamed).join(', ') + (frames.length > mostNamed ? ', …' : '');
  const text = `${frames.length === 1 ? 'Frame' : 'Frames'} ${which} (${frames.length} in all) copy the frame before although a body was moving: not used as data. Check how the footage was stored.`;
  return [{ level: 'caution', code: 'framesDoubled', text }];
}
