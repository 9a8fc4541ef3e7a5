import { type BodyModel, makeMatcher } from './match.ts';
import { patchModel } from './patchModel.ts';
import type { Picture } from './track.ts';
import { trackability } from './trackability.ts';

/** How far the picture has shifted against the reference frame. */
export interface CameraShift {
  readonly xPx: number;
  readonly yPx: number;
  /** Standard uncertainty along each axis [px]. */
  readonly uPx: number;
}

/** Measures the shift of a frame; null when too little of the background is found again. */
export type ShiftGauge = (
  picture: Picture,
  start: { readonly xPx: number; readonly yPx: number },
) => CameraShift | null;

const half = 12;
const mostTiles = 10;
/** Fewer tiles could all be bodies. */
const leastTiles = 4;
const leastScore = 0.7;
const spacingPx = 20;
/** Distance of a tile from the picture's edge, so that it stays inside when the camera moves. */
const marginPx = half + 5;

/**
 * Tiles of the background with structure in both directions, whose median shift is the camera's: tiles on what moves are
 * outvoted.
 *
 * @param avoid  places of bodies
 * @returns null when the background has too little structure to tell
 */
export function makeShiftGauge(
  reference: Picture,
  avoid: readonly { readonly xPx: number; readonly yPx: number; readonly radiusPx: number }[],
): ShiftGauge | null {
  const tiles: { x: number; y: number; model: BodyModel; noise: number }[] = [];
  const quiet = smoothed(reference);
  const places = structured(reference).filter(
    ({ x, y }) => !avoid.some((a) => Math.hypot(a.xPx - x, a.yPx - y) < a.radiusPx + 1.5 * half),
  );
  for (const { x, y } of places) {
    if (tiles.length === mostTiles) break;
    const judged = trackability(reference, x, y, half);
    if (judged.ok) tiles.push({ x, y, model: patchModel(quiet, x, y, half), noise: judged.noise });
  }
  if (tiles.length < leastTiles) return null;
  const matcher = makeMatcher(half);

  return (picture, start) => {
    const shifts = tiles.flatMap(({ x, y, model, noise }) => {
      const m = matcher.match(picture, model, x + start.xPx, y + start.yPx, Math.max(noise, 0.3), null, 1);
      return m?.converged && m.score > leastScore
        ? [{ x: m.xPx - x, y: m.yPx - y, u2: m.varXPx2 + m.varYPx2 }]
        : [];
    });
    if (shifts.length < Math.max(leastTiles, tiles.length / 2)) return null;
    const xPx = median(shifts.map((s) => s.x));
    const yPx = median(shifts.map((s) => s.y));
    const spread = 1.4826 * median(shifts.flatMap((s) => [Math.abs(s.x - xPx), Math.abs(s.y - yPx)]));
    const own = Math.sqrt(median(shifts.map((s) => s.u2)));
    // A median of n has 1.25 times the standard error of their mean; both frames carry noise.
    return { xPx, yPx, uPx: (1.25 * Math.max(spread, own)) / Math.sqrt(shifts.length) };
  };
}

/**
 * The reference with its noise smoothed away (binomial of five pixels each way): a single noisy frame as a template would pull
 * every match towards half pixels, where interpolation smooths its noise.
 */
function smoothed(picture: Picture): Picture {
  const { widthPx, heightPx, luma } = picture;
  const pass = (
    from: ArrayLike<number>,
    step: number,
    at: (i: number) => number,
    count: number,
  ): Float64Array =>
    Float64Array.from({ length: from.length }, (_, i) => {
      const k = at(i);
      const tap = (d: number) => from[i + Math.min(count - 1 - k, Math.max(-k, d)) * step];
      return (tap(-2) + 4 * tap(-1) + 6 * tap(0) + 4 * tap(1) + tap(2)) / 16;
    });
  const rows = pass(luma, 1, (i) => i % widthPx, widthPx);
  const both = pass(rows, widthPx, (i) => Math.floor(i / widthPx), heightPx);
  // Sixteen bits carry the fractions that smoothing brought.
  const scale = 2 ** (16 - picture.bitDepth);
  return { ...picture, bitDepth: 16, luma: Uint16Array.from(both, (v) => Math.round(v * scale)) };
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return (sorted[(sorted.length - 1) >> 1] + sorted[sorted.length >> 1]) / 2;
}

/** Places on a grid, those with the most structure in their weaker direction first. */
function structured({ widthPx, heightPx, luma }: Picture): { x: number; y: number }[] {
  const places: { x: number; y: number; weak: number }[] = [];
  for (let y = marginPx; y < heightPx - marginPx; y += spacingPx) {
    for (let x = marginPx; x < widthPx - marginPx; x += spacingPx) {
      let xx = 0;
      let xy = 0;
      let yy = 0;
      for (let j = y - half; j <= y + half; j++) {
        for (let i = x - half; i <= x + half; i++) {
          const at = j * widthPx + i;
          // Differences over four pixels: noise counts for less than structure.
          const dx = luma[at + 2] - luma[at - 2];
          const dy = luma[at + 2 * widthPx] - luma[at - 2 * widthPx];
          xx += dx * dx;
          xy += dx * dy;
          yy += dy * dy;
        }
      }
      places.push({ x, y, weak: (xx + yy) / 2 - Math.hypot((xx - yy) / 2, xy) });
    }
  }
  return places.sort((a, b) => b.weak - a.weak);
}
