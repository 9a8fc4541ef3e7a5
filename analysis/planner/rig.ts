import type { Finding } from '../sheet/result.ts';
import type { PlanOrder } from './planSchema.ts';
import { expectedPeakMps2, type TetherPeak, tetherPeak } from './tetherPeak.ts';

// Taken where the plan is silent; common practice (no source) of a careful rig. Each use is a finding.
const assumed = {
  gMps2: 9.80665,
  highestCaptureRateHz: 10_000,
  uCaptureRateRel: 5e-5,
  shortestExposureS: 1e-5,
  /** A usual lens sees a field half as high as it is far away. */
  distancePerField: 2,
  uPlaneOffsetM: 0.002,
  uPitchRad: 0.5 * (Math.PI / 180),
  uLensRel: 0.001,
  uLengthM: 0.0005,
  uMarkPx: 0.5,
  /** Coded footage of usual quality. */
  uPositionPx: 0.05,
  barPerField: 0.8,
} as const;

/** The rig that is planned for, with everything settled. */
export interface Rig {
  readonly gMps2: number;
  readonly fallM: number;
  readonly pxPerM: number;
  readonly fieldHeightM: number;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly highestCaptureRateHz: number;
  readonly uCaptureRateRel: number;
  readonly shortestExposureS: number;
  readonly distanceM: number;
  readonly uPlaneOffsetM: number;
  readonly uPitchRad: number;
  readonly uLensRel: number;
  readonly barM: number;
  readonly uBarM: number;
  readonly uMarkPx: number;
  readonly uPositionPx: number;
  readonly ball: PlanOrder['ball'];
  readonly tether: (TetherPeak & { readonly lengthM: number }) | null;
}

export type RigSettled =
  | { readonly ok: true; readonly rig: Rig; readonly findings: readonly Finding[] }
  | { readonly ok: false; readonly problem: string };

/** Fills what the plan leaves out, and says so. */
export function settleRig(order: PlanOrder): RigSettled {
  const { picture, camera, bar, ball } = order;
  const findings: Finding[] = [];
  const take = (stated: number | undefined, value: number, what: string): number => {
    if (stated !== undefined) return stated;
    findings.push({ level: 'note', code: 'assumed', text: `Not stated, so assumed: ${what}.` });
    return value;
  };
  const gMps2 = take(order.gMps2, assumed.gMps2, `gravity of ${assumed.gMps2} m/s² (gMps2)`);
  const field = picture.fieldHeightM;
  const tether = tetherOf(order, gMps2);
  if (tether !== null && 'problem' in tether) return { ok: false, problem: tether.problem };
  if (tether !== null && order.tether?.peakAccelerationMps2 === undefined) {
    findings.push({
      level: 'note',
      code: 'peakExpected',
      text: `Peak acceleration expected from links and separation without loss: ${Number(tether.peakMps2.toPrecision(2))} m/s² within 20 %; damping and a marker's mass make it smaller (a marker of 2 % of the chain's mass to a fifth).`,
    });
  }
  const longestFallM = 0.9 * field;
  const fallM =
    order.fallM ?? Math.min(longestFallM, 0.72 * (order.tether?.lengthM ?? Number.POSITIVE_INFINITY));
  if (fallM > field) {
    return {
      ok: false,
      problem: `fallM: a fall of ${fallM} m does not fit into a field of view of ${field} m; film from farther away`,
    };
  }
  if (order.tether && order.tether.lengthM > field) {
    return {
      ok: false,
      problem: `picture.fieldHeightM: a tether of ${order.tether.lengthM} m does not fit into a field of view of ${field} m; film from farther away`,
    };
  }
  if (bar.lengthM !== undefined && bar.lengthM > field) {
    return {
      ok: false,
      problem: `bar.lengthM: a bar of ${bar.lengthM} m does not fit into a field of view of ${field} m`,
    };
  }
  const distance = assumed.distancePerField * field;
  const barM = assumed.barPerField * field;
  const rig: Rig = {
    gMps2,
    fallM,
    pxPerM: picture.heightPx / field,
    fieldHeightM: field,
    widthPx: picture.widthPx,
    heightPx: picture.heightPx,
    highestCaptureRateHz: take(
      camera.highestCaptureRateHz,
      assumed.highestCaptureRateHz,
      `a camera of up to ${assumed.highestCaptureRateHz} Hz at this picture size (camera.highestCaptureRateHz)`,
    ),
    uCaptureRateRel: take(
      camera.uCaptureRateRel,
      assumed.uCaptureRateRel,
      `capture rate good to ${assumed.uCaptureRateRel} of its value (camera.uCaptureRateRel)`,
    ),
    shortestExposureS: take(
      camera.shortestExposureS,
      assumed.shortestExposureS,
      `exposures down to ${assumed.shortestExposureS * 1e6} µs (camera.shortestExposureS)`,
    ),
    distanceM: take(
      camera.distanceM,
      distance,
      `camera ${Number(distance.toPrecision(3))} m from the plane of motion (camera.distanceM)`,
    ),
    uPlaneOffsetM: take(
      camera.uPlaneOffsetM,
      assumed.uPlaneOffsetM,
      `plane of motion known to ${assumed.uPlaneOffsetM * 1000} mm (camera.uPlaneOffsetM)`,
    ),
    uPitchRad: take(camera.uPitchRad, assumed.uPitchRad, 'camera level to 0.5° (camera.uPitchRad)'),
    uLensRel: take(
      camera.uLensRel,
      assumed.uLensRel,
      `lens corrected to ${100 * assumed.uLensRel} % at the ends of the field (camera.uLensRel)`,
    ),
    barM: take(bar.lengthM, barM, `a scale bar of ${Number(barM.toPrecision(2))} m (bar.lengthM)`),
    uBarM: take(
      bar.uLengthM,
      assumed.uLengthM,
      `length of the scale bar good to ${assumed.uLengthM * 1000} mm (bar.uLengthM)`,
    ),
    uMarkPx: take(
      bar.uMarkPx,
      assumed.uMarkPx,
      `marks of the scale bar good to ${assumed.uMarkPx} px (bar.uMarkPx)`,
    ),
    uPositionPx: take(
      order.uPositionPx,
      assumed.uPositionPx,
      `places of the bodies good to ${assumed.uPositionPx} px, as in coded footage (uPositionPx)`,
    ),
    ball,
    tether,
  };
  return { ok: true, rig, findings };
}

function tetherOf(order: PlanOrder, gMps2: number): Rig['tether'] | { readonly problem: string } {
  const { tether } = order;
  if (!tether) return null;
  const { lengthM, links, separationM, peakAccelerationMps2 } = tether;
  if (peakAccelerationMps2 === undefined && (links === undefined || separationM === undefined)) {
    return {
      problem: 'tether: state peakAccelerationMps2, or links and separationM from which it is expected',
    };
  }
  if (separationM !== undefined && separationM > lengthM) {
    return { problem: `tether.separationM: ${separationM} m is longer than the tether (${lengthM} m)` };
  }
  const peakMps2 = peakAccelerationMps2 ?? expectedPeakMps2(links ?? 0, (separationM ?? 0) / lengthM, gMps2);
  if (!(peakMps2 > gMps2)) {
    return {
      problem: `tether: a peak acceleration of ${Number(peakMps2.toPrecision(3))} m/s² is no more than gravity`,
    };
  }
  return { lengthM, ...tetherPeak(lengthM, peakMps2, gMps2) };
}
