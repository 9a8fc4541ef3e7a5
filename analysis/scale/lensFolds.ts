import type { Lens } from './undistort.ts';

/**
 * Distance from the lens's centre [px] at which its model turns back on itself, so that two places of the picture become one:
 * where r (1 + k1 r² + k2 r⁴) stops growing; null where it never does.
 */
export function foldRadiusPx({ k1, k2, radiusPx }: Pick<Lens, 'k1' | 'k2' | 'radiusPx'>): number | null {
  // 1 + 3 k1 s + 5 k2 s² = 0 for the smallest positive s = (r/radius)²
  const roots =
    k2 === 0
      ? [-1 / (3 * k1)]
      : [-1, 1].map((sign) => (-3 * k1 + sign * Math.sqrt(9 * k1 * k1 - 20 * k2)) / (10 * k2));
  const first = Math.min(...roots.filter((s) => s > 0));
  return Number.isFinite(first) ? radiusPx * Math.sqrt(first) : null;
}

/** Distance from the lens's centre to the farthest corner of the picture [px]. */
export function farthestCornerPx(
  centre: { readonly x: number; readonly y: number },
  { widthPx, heightPx }: { readonly widthPx: number; readonly heightPx: number },
): number {
  const far = (at: number, sizePx: number) => Math.max(at + 0.5, sizePx - 0.5 - at);
  return Math.hypot(far(centre.x, widthPx), far(centre.y, heightPx));
}
