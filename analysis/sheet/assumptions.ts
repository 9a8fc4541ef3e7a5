import type { Finding } from './result.ts';
import type { Sheet, SheetBar } from './sheet.ts';

// Values taken where the sheet is silent. Each is of the size that is common practice (no source) for a careful rig, and each
// use is a finding: the program never assumes in silence.
const assumed = {
  /** Quartz of a camera that was not calibrated: some tens of parts in a million. */
  uCaptureRateRel: 5e-5,
  /** A steel rule read by eye. */
  uLengthM: 0.0005,
  /** A mark set by hand at the pixel. */
  uMarkPx: 0.5,
  /** A ball hung by eye in the plane of the bar. */
  uPlaneOffsetM: 0.002,
  /** A camera levelled with a spirit level. */
  uDownRad: 0.5 * (Math.PI / 180),
  patchPx: 25,
} as const;

/** What the numbers are worked out with: the sheet's statements where it makes them, else the assumption. */
export interface Settled {
  readonly uCaptureRateRel: number;
  readonly exposureS: number;
  readonly rowTimeS: number;
  readonly bars: readonly Required<SheetBar>[];
  readonly planeOffsetM: number;
  readonly uPlaneOffsetM: number;
  readonly uDownWithoutPlumbRad: number;
  /** Patch side for each body, in the sheet's order [px]. */
  readonly patchPx: readonly number[];
  /** One note for each assumption that was made. */
  readonly findings: readonly Finding[];
}

/** Fills what the sheet leaves out, and says so. */
export function settle(sheet: Sheet): Settled {
  const findings: Finding[] = [];
  const take = (stated: number | undefined, value: number, what: string): number => {
    if (stated !== undefined) return stated;
    findings.push({
      level: 'note',
      code: 'assumed',
      text: `Not stated, so assumed: ${what}. State it in the sheet.`,
    });
    return value;
  };

  const { clock, camera, scale, bodies } = sheet;
  const uCaptureRateRel =
    clock.kind === 'captureRate'
      ? take(
          clock.uCaptureRateRel,
          assumed.uCaptureRateRel,
          `capture rate good to ${assumed.uCaptureRateRel} of its value (clock.uCaptureRateRel)`,
        )
      : assumed.uCaptureRateRel;
  if (clock.kind !== 'captureRate') {
    take(undefined, 0, `times of the footage good to ${assumed.uCaptureRateRel} of any interval`);
  }
  const exposureS = take(camera?.exposureS, 0, 'an exposure too short to blur (camera.exposureS)');
  const bars = scale.bars.map((bar, i) => ({
    ...bar,
    uLengthM: take(
      bar.uLengthM,
      assumed.uLengthM,
      `length of the scale bar good to ${assumed.uLengthM * 1000} mm (scale.bars[${i}].uLengthM)`,
    ),
    uMarkPx: take(
      bar.uMarkPx,
      assumed.uMarkPx,
      `marks of the scale bar good to ${assumed.uMarkPx} px (scale.bars[${i}].uMarkPx)`,
    ),
  }));
  const planeOffsetM = take(
    scale.planeOffsetM,
    0,
    'bodies in the plane of the scale bar (scale.planeOffsetM)',
  );
  const uPlaneOffsetM =
    scale.cameraDistanceM === undefined
      ? 0
      : take(
          scale.uPlaneOffsetM,
          assumed.uPlaneOffsetM,
          `plane of motion known to ${assumed.uPlaneOffsetM * 1000} mm (scale.uPlaneOffsetM)`,
        );
  if (scale.cameraDistanceM === undefined) {
    findings.push({
      level: 'caution',
      code: 'cameraDistanceMissing',
      text: 'scale.cameraDistanceM is not stated: how far the bodies are from the plane of the scale bar is not in the budget (5 mm at 2 m is 0.25 %).',
    });
  }
  const patchPx = bodies.map((b) =>
    take(b.patchPx, assumed.patchPx, `patch of ${assumed.patchPx} px for body ${b.id} (bodies[].patchPx)`),
  );
  if (scale.plumb === undefined && scale.bars.length > 0) {
    take(undefined, 0, 'columns of the picture vertical to 0.5° (scale.plumb)');
  }
  return {
    uCaptureRateRel,
    exposureS,
    rowTimeS: camera?.rowTimeS ?? 0,
    bars,
    planeOffsetM,
    uPlaneOffsetM,
    uDownWithoutPlumbRad: assumed.uDownRad,
    patchPx,
    findings,
  };
}
