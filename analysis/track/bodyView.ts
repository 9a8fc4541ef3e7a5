import type { Plate } from './match.ts';
import type { Picture } from './track.ts';

/** How a body looks where it is taken to be in a frame. */
export interface BodyView {
  readonly half: number;
  /** Standard deviation of a pixel's noise [grey levels]. */
  readonly noise: number;
  /** Frame's pixel of the window's (0, 0). */
  readonly left: number;
  readonly top: number;
  /** Appearance times coverage, and coverage, on the window. */
  readonly appearance: Float64Array;
  readonly coverage: Float64Array;
}

/** A body covers a pixel from this coverage on: what shines through an edge is the other body's too. */
const leastCovering = 0.02;
/** Pixels in which two bodies are held against the frame must be covered well by both. */
const wellCovered = 0.9;

/**
 * How much better the second body explains the pixels that both cover than the first: difference of the sums of squares, in
 * variances of the noise.
 */
export function secondIsInFront({ luma, widthPx, heightPx }: Picture, a: BodyView, b: BodyView): number {
  const sideA = 2 * a.half + 1;
  const sideB = 2 * b.half + 1;
  let sum = 0;
  for (let row = 0; row < sideA; row++) {
    const y = a.top + row;
    const rowB = y - b.top;
    if (y < 0 || y >= heightPx || rowB < 0 || rowB >= sideB) continue;
    for (let column = 0; column < sideA; column++) {
      const x = a.left + column;
      const columnB = x - b.left;
      if (x < 0 || x >= widthPx || columnB < 0 || columnB >= sideB) continue;
      const u = row * sideA + column;
      const v = rowB * sideB + columnB;
      if (a.coverage[u] < wellCovered || b.coverage[v] < wellCovered) continue;
      const seen = luma[y * widthPx + x];
      const r = seen - a.appearance[u] / a.coverage[u];
      const s = seen - b.appearance[v] / b.coverage[v];
      sum += r * r - s * s;
    }
  }
  return sum / (a.noise * a.noise);
}

/** The plate with the pixels taken out that bodies in front cover. Without a plate nothing but those pixels is told. */
export function withoutCovered(
  { widthPx, heightPx }: Picture,
  plate: Plate | null,
  inFront: readonly BodyView[],
): Plate {
  const level = plate ? plate.level.slice() : new Float32Array(widthPx * heightPx);
  for (const { half, left, top, coverage } of inFront) {
    const side = 2 * half + 1;
    for (let u = 0; u < coverage.length; u++) {
      const x = left + (u % side);
      const y = top + Math.floor(u / side);
      if (coverage[u] < leastCovering || x < 0 || y < 0 || x >= widthPx || y >= heightPx) continue;
      level[y * widthPx + x] = Number.NaN;
    }
  }
  const flat = plate ?? { slopeX: new Float32Array(level.length), slopeY: new Float32Array(level.length) };
  return { widthPx, heightPx, level, slopeX: flat.slopeX, slopeY: flat.slopeY };
}
