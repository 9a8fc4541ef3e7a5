import type { Settled } from '../sheet/assumptions.ts';
import type { Finding } from '../sheet/result.ts';
import { fitHomography, type Homography, type HomographyFit, inverted, mapped } from './homography.ts';
import type { PlanePoint } from './planePoint.ts';
import { type Lens, undistort } from './undistort.ts';

/** The fiducials' plane as the camera sees it. */
export interface Board {
  /** From the fiducials' coordinates (x right, y up) to the undistorted picture. */
  readonly fit: HomographyFit;
  /** Where a place of the undistorted picture is on the board, with y down [m]. */
  onBoard(flat: PlanePoint, h?: Homography): PlanePoint;
}

/**
 * Planar homography of four or more fiducials.
 *
 * @returns a reason in words where they do not fix one
 */
export function boardOfFiducials(
  fiducials: Settled['fiducials'],
  lens: Lens,
): Board | { readonly reason: string } {
  const flat = fiducials.map((f) => undistort(f.x, f.y, lens));
  const pxPerM = typicalPxPerM(fiducials);
  const fit = fitHomography(
    fiducials.map((f, i) => ({
      from: { x: f.worldXM, y: f.worldYM },
      to: { x: flat[i].xPx, y: flat[i].yPx },
      u: Math.hypot(f.uMarkPx, f.uWorldM * pxPerM) || Number.MIN_VALUE ** 0.25,
    })),
  );
  if ('reason' in fit) return fit;
  const back = inverted(fit.h);
  return {
    fit,
    onBoard(place, h) {
      const at = mapped(h === undefined ? back : inverted(h), place);
      return { x: at.x, y: -at.y };
    },
  };
}

/** Residuals of the fiducials in words; beyond what their uncertainties allow they are a caution that names the worst. */
export function residualFinding(
  fiducials: Settled['fiducials'],
  { residuals, chiSquared, dof }: HomographyFit,
): Finding {
  const off = residuals.map((r) => Math.hypot(r.x, r.y));
  const rms = Math.sqrt(off.reduce((s, r) => s + r * r, 0) / off.length);
  const worst = off.indexOf(Math.max(...off));
  const list = residuals.map((r) => `${r.x.toFixed(2)}, ${r.y.toFixed(2)}`).join('; ');
  const figures = `${fiducials.length} fiducials, residuals ${rms.toPrecision(2)} px RMS, the largest ${off[worst].toPrecision(2)} px at scale.fiducials[${worst}]`;
  if (dof === 0) {
    const text = `${figures}: four fix the map with nothing left over, so that a wrong one does not show; state more.`;
    return { level: 'caution', code: 'fiducialsNotChecked', text };
  }
  // Beyond this chi-squared hardly comes out by chance: its mean and four of its standard deviations.
  if (chiSquared > dof + 4 * Math.sqrt(2 * dof)) {
    const text = `${figures}, ${Math.sqrt(chiSquared / dof).toFixed(1)} times what their uncertainties allow: check that one's place and position. (x, y of all [px]: ${list}.)`;
    return { level: 'caution', code: 'fiducialsDisagree', text };
  }
  return { level: 'note', code: 'fiducialResiduals', text: `${figures}. (x, y of all [px]: ${list}.)` };
}

function typicalPxPerM(fiducials: Settled['fiducials']): number {
  const spread = (of: (f: Settled['fiducials'][number]) => PlanePoint) => {
    const at = fiducials.map(of);
    const mean = (pick: (p: PlanePoint) => number) => at.reduce((s, p) => s + pick(p), 0) / at.length;
    const [x, y] = [mean((p) => p.x), mean((p) => p.y)];
    return Math.sqrt(at.reduce((s, p) => s + (p.x - x) ** 2 + (p.y - y) ** 2, 0));
  };
  return spread((f) => f) / spread((f) => ({ x: f.worldXM, y: f.worldYM }));
}
