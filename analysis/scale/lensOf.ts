import { assumed, type Settled } from '../sheet/assumptions.ts';
import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { independentParts } from './homography.ts';
import { farthestCornerPx } from './lensFolds.ts';
import { lensFromLines } from './lensFromLines.ts';
import type { Lens } from './undistort.ts';

export interface PictureSize {
  readonly widthPx: number;
  readonly heightPx: number;
}

/** The lens that is reckoned with, and what each independent part of its uncertainty makes of it. */
export interface UsedLens {
  readonly lens: Lens;
  readonly parts: readonly Lens[];
  readonly findings: readonly Finding[];
}

/** The lens as stated, else from straight lines, else none with the uncertainty of one that was never calibrated. */
export function lensOf(camera: Sheet['camera'], settled: Settled, picture: PictureSize): UsedLens {
  const findings: Finding[] = [];
  const stated = camera?.lens;
  if (stated === undefined && camera?.straightLines !== undefined) {
    const estimated = lensFromLines(camera.straightLines, picture);
    if (!('reason' in estimated)) {
      const { lens, residualPx } = estimated;
      const corner = 100 * (lens.k1 + lens.k2);
      findings.push({
        level: 'note',
        code: 'lensFromLines',
        text: `Lens from ${camera.straightLines.length} straight lines: k1 ${figure(lens.k1, lens.uK1)}${lens.k2 === 0 ? '' : `, k2 ${figure(lens.k2, lens.uK2)}`}, ${corner.toFixed(2)} % at the corner; the points lie ${residualPx.toPrecision(2)} px off their lines.`,
      });
      return { lens, parts: partsOf(lens, lens), findings };
    }
    findings.push({
      level: 'caution',
      code: 'straightLinesUnfit',
      text: `camera.straightLines: no lens could be had from them, for ${estimated.reason}. None was used.`,
    });
  }
  const centre = { x: (picture.widthPx - 1) / 2, y: (picture.heightPx - 1) / 2 };
  const lens = stated ?? { k1: 0, k2: 0, centre, radiusPx: farthestCornerPx(centre, picture) };
  if (stated?.uK1 !== undefined) {
    return {
      lens,
      parts: partsOf(lens, { uK1: stated.uK1, uK2: stated.uK2 ?? 0, rK1K2: stated.rK1K2 ?? 0 }),
      findings,
    };
  }
  // Straight lines that say nothing leave a lens that was never calibrated.
  const cornerRel = settled.uLensCornerRel ?? assumed.uLensUncalibratedRel;
  const uK1 = cornerRel * (lens.radiusPx / farthestCornerPx(lens.centre, picture)) ** 2;
  return { lens, parts: partsOf(lens, { uK1, uK2: 0, rK1K2: 0 }), findings };
}

function partsOf(lens: Lens, { uK1, uK2, rK1K2 }: { uK1: number; uK2: number; rK1K2: number }): Lens[] {
  const between = rK1K2 * uK1 * uK2;
  return independentParts([Float64Array.of(uK1 * uK1, between), Float64Array.of(between, uK2 * uK2)]).map(
    ([k1, k2]) => ({ ...lens, k1: lens.k1 + k1, k2: lens.k2 + k2 }),
  );
}

function figure(value: number, u: number): string {
  return `${value.toFixed(5)} ± ${u.toFixed(5)}`;
}
