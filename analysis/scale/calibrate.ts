import type { RelativeSource } from '../motion/worldTrack.ts';
import type { Settled } from '../sheet/assumptions.ts';
import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import type { PixelPoint, WorldPoint } from './spaces.ts';
import { type Lens, undistort } from './undistort.ts';

/** How the picture maps to the plane of motion, and how well that is known. */
export interface Calibration {
  /** Metres in one (undistorted) pixel, in the plane of motion. */
  readonly metrePerPx: number;
  /** Relative standard uncertainties of all lengths, by source. */
  readonly length: readonly RelativeSource[];
  /** Angle from the picture's columns to the plumb line [rad], positive clockwise as seen in the picture. */
  readonly downRad: number;
  readonly uDownRad: number;
  readonly findings: readonly Finding[];
  toWorld(point: PixelPoint): WorldPoint;
}

/**
 * Scale and direction of down from the sheet's bars (else fiducials) and plumb line.
 *
 * One bar: m/px = length / distance of its marks. Several: their mean weighted with their relative variances; a spread beyond
 * their uncertainties is a finding and widens the uncertainty (Birge ratio). A body in front of the bar's plane by z looks
 * larger: m/px there is smaller by (D - z)/D, D the distance from the camera to the bar.
 *
 * @param origin  pixel that becomes (0, 0) of the world
 */
export function calibrate(
  sheet: Sheet,
  settled: Settled,
  origin: { readonly x: number; readonly y: number },
): Calibration {
  const lens = sheet.camera?.lens;
  const findings: Finding[] = [];
  const fromBars = settled.bars.length > 0 ? scaleOfBars(settled.bars, lens, findings) : null;
  const fiducials = sheet.scale.fiducials ?? [];
  const fromFiducials = fromBars === null ? similarityOfFiducials(fiducials, lens) : null;
  if (fromBars !== null && fiducials.length > 0) {
    findings.push({
      level: 'caution',
      code: 'fiducialsNotUsed',
      text: 'Fiducials and a scale bar are stated: the scale was taken from the bar alone.',
    });
  }
  const base = fromBars ?? fromFiducials;
  if (!base) throw new Error('calibrate: no bar and fewer than four fiducials; checkSheet refuses this');

  const { cameraDistanceM } = sheet.scale;
  const length: RelativeSource[] = [...base.length];
  let planeFactor = 1;
  if (cameraDistanceM !== undefined) {
    planeFactor = (cameraDistanceM - settled.planeOffsetM) / cameraDistanceM;
    length.push({
      source: 'plane offset',
      uRel: settled.uPlaneOffsetM / (cameraDistanceM - settled.planeOffsetM),
    });
  }
  const metrePerPx = base.metrePerPx * planeFactor;

  const down = downDirection(sheet, settled, lens, fromFiducials?.downRad ?? null);
  const cos = Math.cos(down.downRad);
  const sin = Math.sin(down.downRad);
  const zero = undistort(origin.x, origin.y, lens);
  return {
    metrePerPx,
    length,
    downRad: down.downRad,
    uDownRad: down.uDownRad,
    findings,
    toWorld(point) {
      const flat = undistort(point.xPx, point.yPx, lens);
      const dx = flat.xPx - zero.xPx;
      const dy = flat.yPx - zero.yPx;
      // Down in the picture is (-sin, cos): project on it and on the direction at right angles.
      return {
        space: 'world',
        xM: metrePerPx * (dx * cos + dy * sin),
        yM: -metrePerPx * (dy * cos - dx * sin),
      };
    },
  };
}

interface BaseScale {
  readonly metrePerPx: number;
  readonly length: RelativeSource[];
}

function scaleOfBars(bars: Settled['bars'], lens: Lens | undefined, findings: Finding[]): BaseScale {
  const each = bars.map((bar) => {
    const a = undistort(bar.a.x, bar.a.y, lens);
    const b = undistort(bar.b.x, bar.b.y, lens);
    const px = Math.hypot(b.xPx - a.xPx, b.yPx - a.yPx);
    return {
      metrePerPx: bar.lengthM / px,
      uLengthRel: bar.uLengthM / bar.lengthM,
      uMarksRel: (Math.SQRT2 * bar.uMarkPx) / px, // two marks, each with uMarkPx along the bar
    };
  });
  const variances = each.map((e) => e.uLengthRel ** 2 + e.uMarksRel ** 2);
  const weights = variances.map((v) => (variances.every((w) => w > 0) ? 1 / v : 1));
  const sum = weights.reduce((s, w) => s + w, 0);
  const share = weights.map((w) => w / sum);
  const metrePerPx = each.reduce((s, e, i) => s + share[i] * e.metrePerPx, 0);
  const combine = (pick: (e: (typeof each)[number]) => number) =>
    Math.sqrt(each.reduce((s, e, i) => s + (share[i] * pick(e)) ** 2, 0));
  const length = [
    { source: 'scale bar length', uRel: combine((e) => e.uLengthRel) },
    { source: 'scale bar marks', uRel: combine((e) => e.uMarksRel) },
  ];
  if (each.length > 1) {
    const chiSquared = each.reduce(
      (s, e, i) => s + (e.metrePerPx / metrePerPx - 1) ** 2 / Math.max(variances[i], 1e-12),
      0,
    );
    const birge = Math.sqrt(chiSquared / (each.length - 1));
    if (birge > 2) {
      const spread =
        Math.max(...each.map((e) => e.metrePerPx)) / Math.min(...each.map((e) => e.metrePerPx)) - 1;
      findings.push({
        level: 'caution',
        code: 'barsDisagree',
        text: `The scale bars disagree by ${(100 * spread).toPrecision(2)} %, ${birge.toFixed(1)} times what their uncertainties allow: check marks and lengths.`,
      });
      length.push({
        source: 'disagreement of bars',
        uRel: Math.sqrt(birge ** 2 - 1) * Math.hypot(length[0].uRel, length[1].uRel),
      });
    }
  }
  return { metrePerPx, length };
}

/**
 * Least-squares similarity from pixels to the fiducials' world places: with complex numbers W = a p + t, p = x - i y.
 * |a| is m/px and arg a the turn that makes the fiducials' y axis point up.
 */
function similarityOfFiducials(
  fiducials: NonNullable<Sheet['scale']['fiducials']>,
  lens: Lens | undefined,
): (BaseScale & { downRad: number }) | null {
  const n = fiducials.length;
  if (n < 4) return null;
  const points = fiducials.map((f) => {
    const flat = undistort(f.x, f.y, lens);
    return { px: flat.xPx, py: -flat.yPx, wx: f.worldXM, wy: f.worldYM };
  });
  const mean = (pick: (p: (typeof points)[number]) => number) => points.reduce((s, p) => s + pick(p), 0) / n;
  const [mpx, mpy, mwx, mwy] = [mean((p) => p.px), mean((p) => p.py), mean((p) => p.wx), mean((p) => p.wy)];
  let pp = 0;
  let re = 0;
  let im = 0;
  for (const p of points) {
    const [dx, dy, ex, ey] = [p.px - mpx, p.py - mpy, p.wx - mwx, p.wy - mwy];
    pp += dx * dx + dy * dy;
    re += dx * ex + dy * ey;
    im += dx * ey - dy * ex;
  }
  const [aRe, aIm] = [re / pp, im / pp];
  let residual = 0;
  for (const p of points) {
    const [dx, dy] = [p.px - mpx, p.py - mpy];
    residual += (p.wx - mwx - (aRe * dx - aIm * dy)) ** 2 + (p.wy - mwy - (aIm * dx + aRe * dy)) ** 2;
  }
  const metrePerPx = Math.hypot(aRe, aIm);
  const uA = Math.sqrt(residual / (2 * n - 4) / pp);
  return {
    metrePerPx,
    length: [{ source: 'fiducials', uRel: uA / metrePerPx }],
    downRad: Math.atan2(aIm, aRe),
  };
}

function downDirection(
  sheet: Sheet,
  settled: Settled,
  lens: Lens | undefined,
  fiducialsDownRad: number | null,
): { downRad: number; uDownRad: number } {
  const { plumb } = sheet.scale;
  if (!plumb) {
    return { downRad: fiducialsDownRad ?? 0, uDownRad: settled.uDownWithoutPlumbRad };
  }
  const a = undistort(plumb.a.x, plumb.a.y, lens);
  const b = undistort(plumb.b.x, plumb.b.y, lens);
  const [top, bottom] = a.yPx <= b.yPx ? [a, b] : [b, a];
  const dx = bottom.xPx - top.xPx;
  const dy = bottom.yPx - top.yPx;
  // Marks of the plumb line are set like those of the bars: half a pixel each where no bar says better.
  const uMarkPx = settled.bars[0]?.uMarkPx || 0.5;
  return { downRad: -Math.atan2(dx, dy), uDownRad: (Math.SQRT2 * uMarkPx) / Math.hypot(dx, dy) };
}
