import type { RelativeSource } from '../motion/worldTrack.ts';
import type { Settled } from '../sheet/assumptions.ts';
import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { residualFinding } from './boardOfFiducials.ts';
import { lensOf, type PictureSize } from './lensOf.ts';
import { type RigInputs, type RigMapping, rigMapping } from './rigMapping.ts';
import type { PixelPoint, WorldPoint } from './spaces.ts';

/** How the picture maps to the plane of motion, and how well that is known. */
export interface Calibration {
  /** Metres in one (undistorted) pixel of the plane of motion, where the camera's axis meets it. */
  readonly metrePerPx: number;
  /** Relative standard uncertainties of all lengths, by source. */
  readonly length: readonly RelativeSource[];
  /** Angle from the picture's columns (with fiducials: from their y axis) to the plumb line [rad], positive clockwise as seen. */
  readonly downRad: number;
  readonly uDownRad: number;
  readonly findings: readonly Finding[];
  toWorld(point: PixelPoint): WorldPoint;
  /** Standard uncertainties of a place in metres from those in the picture, by the local scale and turn of the map. */
  uWorld(point: PixelPoint, uXPx: number, uYPx: number): { readonly uXM: number; readonly uYM: number };
}

/** What `calibrate` may be asked to take instead of what is settled. */
export interface Turned {
  readonly pitchRad: number;
  readonly uPitchRad: number;
}

/**
 * Scale and direction of down from the sheet's bars (else fiducials) and plumb line, with lens, turn and offset of the plane.
 *
 * Errors of bar, marks and offset stretch all lengths alike. Those of lens, pitch, yaw and homography move places by different
 * shares: their sources carry how (`moves`), the same in all frames.
 *
 * @param origin   pixel that becomes (0, 0) of the world
 * @param picture  size of the footage's picture
 * @param pitch    pitch that was found otherwise than stated
 * @throws RangeError if fiducials fix no homography (`checkSheet` refuses them)
 */
export function calibrate(
  sheet: Sheet,
  settled: Settled,
  origin: { readonly x: number; readonly y: number },
  picture: PictureSize,
  pitch?: Turned,
): Calibration {
  if (settled.bars.length === 0 && settled.fiducials.length < 4) {
    throw new RangeError('calibrate: no bar and fewer than four fiducials; checkSheet refuses this');
  }
  const { lens, parts: lensParts, findings: lensFindings } = lensOf(sheet.camera, settled, picture);
  const turn = { ...settled.turn, ...pitch };
  const inputs: RigInputs = { lens, turn };
  const withInputs = (other: Partial<RigInputs>) =>
    rigMapping(sheet, settled, picture, origin, { ...inputs, ...other });
  const rig = withInputs({});

  const moving = (source: string, rigs: readonly RigMapping[]) =>
    rigs.length === 0 ? [] : [movingSource(source, rig, rigs, origin, picture)];
  const uPitch = turn.uPitchRad;
  const uYaw = turn.uYawRad;
  const { pitchRad, yawRad } = turn;
  const distance = rig.distanceM - settled.planeOffsetM;
  const length: RelativeSource[] = [
    ...(rig.bars?.length ?? []),
    ...moving(
      'fiducials',
      rig.board ? rig.board.fit.parts.map((homography) => withInputs({ homography })) : [],
    ),
    ...(settled.uPlaneOffsetM > 0
      ? [{ source: 'plane offset', uRel: settled.uPlaneOffsetM / distance }]
      : []),
    ...moving(
      'camera pitch',
      uPitch > 0 ? [withInputs({ turn: { pitchRad: pitchRad + uPitch, yawRad } })] : [],
    ),
    ...moving('camera yaw', uYaw > 0 ? [withInputs({ turn: { pitchRad, yawRad: yawRad + uYaw } })] : []),
    ...moving(
      'lens',
      lensParts.map((part) => withInputs({ lens: part })),
    ),
  ];
  return {
    metrePerPx: rig.metrePerPx,
    length,
    downRad: rig.down.downRad,
    uDownRad: rig.down.uDownRad,
    findings: [...lensFindings, ...rigFindings(settled, rig)],
    toWorld: rig.toWorld,
    uWorld({ xPx, yPx }, uXPx, uYPx) {
      const at = (dx: number, dy: number) => rig.toWorld({ space: 'pixel', xPx: xPx + dx, yPx: yPx + dy });
      const [left, right, above, below] = [at(-0.5, 0), at(0.5, 0), at(0, -0.5), at(0, 0.5)];
      return {
        uXM: Math.hypot((right.xM - left.xM) * uXPx, (below.xM - above.xM) * uYPx),
        uYM: Math.hypot((right.yM - left.yM) * uXPx, (below.yM - above.yM) * uYPx),
      };
    },
  };
}

/** A source whose errors move places by different shares; its figure is that of the whole height of the picture. */
function movingSource(
  source: string,
  rig: RigMapping,
  rigs: readonly RigMapping[],
  origin: { readonly x: number; readonly y: number },
  picture: PictureSize,
): RelativeSource {
  const moves = rigs.map(
    (moved) => (place: { readonly xM: number; readonly yM: number }) =>
      moved.toWorld(pixelOf(rig, place, origin)),
  );
  const end = (yPx: number) => ({ space: 'pixel', xPx: origin.x, yPx }) as const;
  const lengthBy = ({ toWorld }: RigMapping) => {
    const [top, bottom] = [toWorld(end(0)), toWorld(end(picture.heightPx - 1))];
    return Math.hypot(bottom.xM - top.xM, bottom.yM - top.yM);
  };
  const uRel = Math.hypot(...rigs.map((moved) => lengthBy(moved) / lengthBy(rig) - 1));
  return { source, uRel, moves };
}

/** Where a place of the world is in the picture: Newton's method with differences; the map is all but linear. */
function pixelOf(
  rig: RigMapping,
  place: { readonly xM: number; readonly yM: number },
  start: { readonly x: number; readonly y: number },
): PixelPoint {
  let [xPx, yPx] = [start.x, start.y];
  for (let step = 0; step < 30; step++) {
    const at = (dx: number, dy: number) => rig.toWorld({ space: 'pixel', xPx: xPx + dx, yPx: yPx + dy });
    const [here, right, below] = [at(0, 0), at(0.5, 0), at(0, 0.5)];
    const [a, b] = [2 * (right.xM - here.xM), 2 * (below.xM - here.xM)];
    const [c, d] = [2 * (right.yM - here.yM), 2 * (below.yM - here.yM)];
    const [ex, ey] = [place.xM - here.xM, place.yM - here.yM];
    const determinant = a * d - b * c;
    const [dx, dy] = [(ex * d - b * ey) / determinant, (a * ey - c * ex) / determinant];
    xPx += dx;
    yPx += dy;
    if (Math.hypot(dx, dy) < 1e-9) break;
  }
  return { space: 'pixel', xPx, yPx };
}

function rigFindings(settled: Settled, rig: RigMapping): Finding[] {
  const findings: Finding[] = [...(rig.bars?.findings ?? [])];
  if (rig.bars !== null && settled.fiducials.length > 0) {
    findings.push({
      level: 'caution',
      code: 'fiducialsNotUsed',
      text: 'Fiducials and a scale bar are stated: the scale was taken from the bar alone.',
    });
  }
  if (rig.board) findings.push(residualFinding(settled.fiducials, rig.board.fit));
  return findings;
}
