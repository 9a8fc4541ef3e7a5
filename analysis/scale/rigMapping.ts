import { assumed, type Settled } from '../sheet/assumptions.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { type Board, boardOfFiducials } from './boardOfFiducials.ts';
import type { Homography } from './homography.ts';
import type { PlanePoint } from './planePoint.ts';
import { type Down, downAlong } from './plumbLine.ts';
import { type BarsTogether, scaleOfBars } from './scaleOfBars.ts';
import type { PixelPoint, WorldPoint } from './spaces.ts';
import { inTurnedPlane, type Turn } from './turnedPlane.ts';
import { type Lens, undistort } from './undistort.ts';

/** What the map from picture to plane of motion depends on; each may be tried with other values. */
export interface RigInputs {
  readonly lens: Lens;
  readonly turn: Turn;
  /** Instead of the fiducials' own. */
  readonly homography?: Homography;
}

export interface RigMapping {
  toWorld(point: PixelPoint): WorldPoint;
  readonly down: Down;
  /** Metres per (undistorted) pixel where the camera's axis meets the plane of motion. */
  readonly metrePerPx: number;
  readonly distanceM: number;
  /** Null with fiducials. */
  readonly bars: BarsTogether | null;
  /** Null with bars. */
  readonly board: Board | null;
}

/** A mark of the plumb line where no bar says how well marks are set [px]. */
const uPlumbMarkPx = 0.5;

/**
 * From places in the picture to places in the plane of motion: lens, then scale bars in that plane or the homography of the
 * fiducials, then its turn against the camera (against the fiducials), then its offset.
 *
 * A body in front of the bar's plane by z looks larger: metres per pixel there are smaller by (D - z)/D, D the distance of the
 * camera. Seen from a fixed camera this is exact for places relative to each other, whatever the turn.
 *
 * @throws RangeError if the fiducials fix no homography
 */
export function rigMapping(
  sheet: Sheet,
  settled: Settled,
  picture: { readonly widthPx: number; readonly heightPx: number },
  origin: PlanePoint,
  inputs: RigInputs,
): RigMapping {
  const { lens, turn, homography } = inputs;
  const flatOf = (p: PlanePoint): PlanePoint => {
    const flat = undistort(p.x, p.y, lens);
    return { x: flat.xPx, y: flat.yPx };
  };
  // The camera's axis meets the picture in the centre of the lens.
  const axis = lens.centre;
  const board = settled.bars.length === 0 ? boardOrThrow(settled, lens) : null;
  const before = board
    ? (p: PlanePoint) => board.onBoard(flatOf(p), homography)
    : (p: PlanePoint) => flatOf(p);
  const uMark = (settled.bars[0]?.uMarkPx || uPlumbMarkPx) * (board ? scaleAt(before, axis) : 1);
  const { plumb } = sheet.scale;
  const down: Down = plumb
    ? downAlong(before(plumb.a), before(plumb.b), uMark)
    : { downRad: 0, uDownRad: settled.uDownWithoutPlumbRad };
  const [cos, sin] = [Math.cos(down.downRad), Math.sin(down.downRad)];
  const axisBefore = before(axis);
  /** From the axis, x across and y along the plumb line, in the unit of `before`. */
  const fromAxis = (p: PlanePoint): PlanePoint => {
    const at = before(p);
    const [dx, dy] = [at.x - axisBefore.x, at.y - axisBefore.y];
    return { x: dx * cos + dy * sin, y: dy * cos - dx * sin };
  };
  const stated = sheet.scale.cameraDistanceM;
  const inPlane = (p: PlanePoint, metrePer: number, distanceM: number): PlanePoint => {
    const seen = fromAxis(p);
    return inTurnedPlane({ x: metrePer * seen.x, y: metrePer * seen.y }, turn, distanceM);
  };
  const distanceFor = (metrePerPx: number) =>
    stated ?? assumed.distanceHeights * picture.heightPx * metrePerPx;

  let bars: BarsTogether | null = null;
  let metrePer = 1;
  if (!board) {
    bars = scaleOfBars(
      settled.bars,
      settled.bars.map((bar) => {
        const [a, b] = [flatOf(bar.a), flatOf(bar.b)];
        const lengthPx = Math.hypot(b.x - a.x, b.y - a.y);
        return {
          lengthPx,
          metrePerPx: matchLength(bar.lengthM, bar.lengthM / lengthPx, (m) => {
            const [p, q] = [inPlane(bar.a, m, distanceFor(m)), inPlane(bar.b, m, distanceFor(m))];
            return Math.hypot(q.x - p.x, q.y - p.y);
          }),
        };
      }),
    );
    metrePer = bars.metrePerPx;
  }
  const atAxis = board ? scaleAt(before, axis) : metrePer;
  const distanceM = distanceFor(atAxis);
  const planeFactor = (distanceM - settled.planeOffsetM) / distanceM;
  const zero = inPlane(origin, metrePer, distanceM);
  return {
    down,
    metrePerPx: atAxis * planeFactor,
    distanceM,
    bars,
    board,
    toWorld({ xPx, yPx }) {
      const at = inPlane({ x: xPx, y: yPx }, metrePer, distanceM);
      return { space: 'world', xM: planeFactor * (at.x - zero.x), yM: -planeFactor * (at.y - zero.y) };
    },
  };
}

function boardOrThrow(settled: Settled, lens: Lens): Board {
  const board = boardOfFiducials(settled.fiducials, lens);
  if ('reason' in board) throw new RangeError(`rigMapping: no homography, for ${board.reason}`);
  return board;
}

/** Metres in one pixel at a place: root of the area of a pixel there. */
function scaleAt(before: (p: PlanePoint) => PlanePoint, { x, y }: PlanePoint): number {
  const [a, b, c] = [before({ x, y }), before({ x: x + 1, y }), before({ x, y: y + 1 })];
  return Math.sqrt(Math.abs((b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x)));
}

/** The scale at which a bar has its length; all but proportional to it, so that correcting by the ratio settles in a few rounds. */
function matchLength(lengthM: number, start: number, lengthAt: (metrePerPx: number) => number): number {
  let metrePerPx = start;
  for (let round = 0; round < 50; round++) {
    const ratio = lengthM / lengthAt(metrePerPx);
    metrePerPx *= ratio;
    if (Math.abs(ratio - 1) < 1e-14) break;
  }
  return metrePerPx;
}
