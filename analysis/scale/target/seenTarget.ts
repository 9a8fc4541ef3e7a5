import type { Picture } from '../../track/track.ts';
import { refineMark } from '../mark/refineMark.ts';
import { roughCorners } from './corners.ts';
import { roughDots } from './dots.ts';
import { type GridPoint, orderGrid } from './orderGrid.ts';

/** A flat target of regular dots, or of a chessboard's inner corners. */
export interface TargetPattern {
  readonly kind: 'dots' | 'squares';
  readonly columns: number;
  readonly rows: number;
}

/** Less of the target than this is not worth using. */
const leastFound = 0.6;

/**
 * The points of a flat target in a picture, to sub-pixel, with their columns and rows.
 *
 * @returns a reason in words where it is not seen
 */
export function seenTarget(
  picture: Picture,
  { kind, columns, rows }: TargetPattern,
): GridPoint[] | { readonly reason: string } {
  const rough = kind === 'dots' ? roughDots(picture) : roughCorners(picture);
  const shape = kind === 'dots' ? 'disc' : 'quadrant';
  const grid = rough.length < 4 ? [] : orderGrid(rough);
  const name = kind === 'dots' ? 'dots' : 'inner corners';
  const wanted = columns * rows;
  const span = (of: (p: GridPoint) => number) =>
    grid.length === 0 ? 0 : Math.max(...grid.map(of)) - Math.min(...grid.map(of)) + 1;
  const [long, short] = [Math.max(columns, rows), Math.min(columns, rows)];
  const [seenLong, seenShort] = [span((p) => p.column), span((p) => p.row)].sort((a, b) => b - a);
  if (seenLong > long || seenShort > short) {
    return {
      reason: `${seenLong} × ${seenShort} ${name} are seen, more than the ${long} × ${short} that are stated`,
    };
  }
  const refined = grid.flatMap((p): GridPoint[] => {
    const mark = refineMark(picture, p, shape, 3);
    return mark.ok ? [{ ...p, x: mark.x, y: mark.y }] : [];
  });
  if (refined.length < leastFound * wanted) {
    return { reason: `only ${refined.length} of ${wanted} ${name} are seen clearly` };
  }
  return refined;
}
