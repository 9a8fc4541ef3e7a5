import type { PlanePoint } from '../planePoint.ts';

/** A point of a regular target with its column and row, counted from an arbitrary one. */
export interface GridPoint extends PlanePoint {
  readonly column: number;
  readonly row: number;
}

/** A neighbour is sought within this share of the distance to it: the pitch changes slowly over a target seen from aside. */
const within = 0.3;

/**
 * Columns and rows of the points of a regular grid that is seen from aside and through a lens: from one point to its neighbours,
 * each expected where the last step leads. Points that are on no grid are left out. Which way columns and rows run is arbitrary.
 */
export function orderGrid(points: readonly PlanePoint[]): GridPoint[] {
  let most: GridPoint[] = [];
  // A start on a speck finds nothing around it: the largest grid of a few starts counts.
  for (const seed of startsAmong(points)) {
    const found = gridFrom(points, seed);
    if (found.length > most.length) most = found;
    if (most.length > 0.7 * points.length) break;
  }
  return most;
}

function startsAmong(points: readonly PlanePoint[]): PlanePoint[] {
  const n = points.length;
  const [mx, my] = [points.reduce((s, p) => s + p.x, 0) / n, points.reduce((s, p) => s + p.y, 0) / n];
  return [...points]
    .sort((a, b) => Math.hypot(a.x - mx, a.y - my) - Math.hypot(b.x - mx, b.y - my))
    .slice(0, 12);
}

function gridFrom(points: readonly PlanePoint[], seed: PlanePoint): GridPoint[] {
  const steps = points
    .filter((p) => p !== seed)
    .map((p) => ({ x: p.x - seed.x, y: p.y - seed.y }))
    .sort((a, b) => Math.hypot(a.x, a.y) - Math.hypot(b.x, b.y));
  const across = steps[0];
  if (!across) return [];
  const long = Math.hypot(across.x, across.y);
  const along = steps.find((s) => {
    const size = Math.hypot(s.x, s.y);
    return size < 2 * long && Math.abs(across.x * s.y - across.y * s.x) > 0.7 * long * size;
  });
  if (!along) return [];
  const placed = new Map<PlanePoint, GridPoint>([[seed, { ...seed, column: 0, row: 0 }]]);
  const taken = new Set(['0,0']);
  const queue = [{ point: seed, column: 0, row: 0, across, along }];
  for (const { point, column, row, across: a, along: b } of queue) {
    for (const [dc, dr] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
    ]) {
      const name = `${column + dc},${row + dr}`;
      if (taken.has(name)) continue;
      const step = { x: dc * a.x + dr * b.x, y: dc * a.y + dr * b.y };
      const reach = within * Math.hypot(step.x, step.y);
      const next = points.find(
        (p) => !placed.has(p) && Math.hypot(p.x - point.x - step.x, p.y - point.y - step.y) < reach,
      );
      if (!next) continue;
      taken.add(name);
      placed.set(next, { x: next.x, y: next.y, column: column + dc, row: row + dr });
      const made = { x: (next.x - point.x) * (dc + dr), y: (next.y - point.y) * (dc + dr) };
      queue.push({
        point: next,
        column: column + dc,
        row: row + dr,
        across: dc === 0 ? a : made,
        along: dr === 0 ? b : made,
      });
    }
  }
  return Array.from(placed.values());
}
