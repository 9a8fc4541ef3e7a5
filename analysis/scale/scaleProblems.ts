import { settle } from '../sheet/assumptions.ts';
import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { boardOfFiducials } from './boardOfFiducials.ts';
import { farthestCornerPx, foldRadiusPx } from './lensFolds.ts';
import type { PictureSize } from './lensOf.ts';

/** What makes fiducials, lens or pitch of a sheet unusable, as far as it can be told without the footage. */
export function scaleProblems(sheet: Sheet): Finding[] {
  const { scale, camera, bodies } = sheet;
  const findings: Finding[] = [];
  const stop = (code: string, text: string) => findings.push({ level: 'stop', code, text });
  const fiducials = scale.fiducials ?? [];
  if (fiducials.length >= 4 && scale.bars.length === 0) {
    const lens = camera?.lens ?? { k1: 0, k2: 0, centre: { x: 0, y: 0 }, radiusPx: 1 };
    const board = boardOfFiducials(settle(sheet).fiducials, lens);
    if ('reason' in board) {
      stop(
        'fiducialsUnfit',
        `scale.fiducials: no scale can be had from them, for ${board.reason}; state four or more that span the fall in width and height.`,
      );
    }
  } else if (fiducials.length > 0 && fiducials.length < 4 && scale.bars.length === 0) {
    stop(
      'fiducialsTooFew',
      `scale.fiducials: ${fiducials.length} stated, but four or more are needed for a homography; state more, or a scale bar.`,
    );
  }
  if (scale.pitchFromFall) {
    if (!bodies.some((b) => b.role === 'reference' && b.diameterM !== undefined && b.massKg !== undefined)) {
      stop(
        'pitchFromFallWithoutDrag',
        'scale.pitchFromFall: pitch and drag cannot be told apart in a fall, so the drag must be known; state diameterM and massKg of a reference body, or pitchDeg.',
      );
    }
    if (scale.cameraDistanceM === undefined) {
      stop(
        'pitchFromFallWithoutDistance',
        'scale.pitchFromFall needs scale.cameraDistanceM; state it, or pitchDeg.',
      );
    }
    if (scale.uPitchDeg !== undefined) {
      stop(
        'pitchTwice',
        'scale.pitchFromFall and scale.uPitchDeg: the pitch is either found from the fall or stated; leave one of them out.',
      );
    }
  }
  return findings;
}

/** Why the stated lens cannot be that of a picture of this size; null where it can. */
export function lensProblem(sheet: Sheet, picture: PictureSize): Finding | null {
  const lens = sheet.camera?.lens;
  if (lens === undefined) return null;
  const fold = foldRadiusPx(lens);
  const corner = farthestCornerPx(lens.centre, picture);
  if (fold === null || fold > corner) return null;
  return {
    level: 'stop',
    code: 'lensFolds',
    text: `camera.lens: with k1 ${lens.k1} and k2 ${lens.k2} the model turns back on itself ${fold.toFixed(0)} px from its centre, inside the picture (its farthest corner is ${corner.toFixed(0)} px away); check the coefficients, their sign and radiusPx.`,
  };
}
