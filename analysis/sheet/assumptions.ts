import { type SecondClock, uIntervalUnstatedS } from '../clock/secondClock.ts';
import { airOf } from '../theory/air.ts';
import { siteGravity } from '../theory/normalGravity.ts';
import type { Finding } from './result.ts';
import type { Sheet, SheetBar, SheetFiducial } from './sheet.ts';

// Values taken where the sheet is silent. Each is of the size that is common practice (no source) for a careful rig, and each
// use is a finding: the program never assumes in silence.
export const assumed = {
  /** Quartz of a camera that was not calibrated: some tens of parts in a million. */
  uCaptureRateRel: 5e-5,
  /** A steel rule read by eye. */
  uLengthM: 0.0005,
  /** A mark set by hand at the pixel. */
  uMarkPx: 0.5,
  /** A tether measured along a steel rule. */
  uTetherLengthM: 0.001,
  /** A ball hung by eye in the plane of the bar. */
  uPlaneOffsetM: 0.002,
  /** A camera levelled with a spirit level. */
  uDownRad: 0.5 * (Math.PI / 180),
  /** A camera pointed at the rig with a spirit level and by eye. */
  uTurnDeg: 0.5,
  /** A board with fiducials hung by a spirit level. */
  uBoardDeg: 0.2,
  /** A fiducial printed, or measured with a rule. */
  uWorldM: 0.0002,
  /** Distance of the camera in heights of its picture: a lens of ordinary focal length sees 25° of height. */
  distanceHeights: 2.2,
  /** Shift at the picture's corner, as a share of its distance from the middle: a lens that was not calibrated, and one that was. */
  uLensUncalibratedRel: 0.002,
  uLensCalibratedRel: 0.0005,
  patchPx: 25,
} as const;

/** What the numbers are worked out with: the sheet's statements where it makes them, else the assumption. */
export interface Settled {
  /** Relative standard uncertainty of time intervals, whatever the clock. */
  readonly uCaptureRateRel: number;
  /** Standard uncertainty of the interval on the clock in the picture [s]; 0 where there is none. */
  readonly uSecondClockS: number;
  /** The tether with its length's uncertainty. */
  readonly tether: Sheet['tether'];
  readonly exposureS: number;
  readonly rowTimeS: number;
  readonly bars: readonly (SheetBar & { readonly uLengthM: number; readonly uMarkPx: number })[];
  readonly fiducials: readonly (SheetFiducial & { readonly uMarkPx: number; readonly uWorldM: number })[];
  /** How far the camera looks down on the plane of the fall, and how far it is turned aside (sheet: pitchDeg, yawDeg) [rad]. */
  readonly turn: {
    readonly pitchRad: number;
    readonly uPitchRad: number;
    readonly yawRad: number;
    readonly uYawRad: number;
  };
  /**
   * Standard uncertainty of the lens's shift at the picture's farthest corner, as a share of the corner's distance from the lens's
   * centre; null where the sheet says otherwise (uK1, straight lines).
   */
  readonly uLensCornerRel: number | null;
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

  const { clock, camera, scale, bodies, tether } = sheet;
  const uSecondClockS = clock.secondClock ? uIntervalOf(clock.secondClock, take) : 0;
  const uCaptureRateRel = uTimeOf(clock, uSecondClockS, take);
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
  const fiducials = (scale.fiducials ?? []).map((f, i) => ({
    ...f,
    uMarkPx: take(
      f.uMarkPx,
      assumed.uMarkPx,
      `mark of the fiducial good to ${assumed.uMarkPx} px (scale.fiducials[${i}].uMarkPx)`,
    ),
    uWorldM: take(
      f.uWorldM,
      assumed.uWorldM,
      `position of the fiducial good to ${assumed.uWorldM * 1000} mm (scale.fiducials[${i}].uWorldM)`,
    ),
  }));
  const turn = turnOf(scale, take);
  const uLensCornerRel = uLensOf(camera, take);
  const planeOffsetM = take(
    scale.planeOffsetM,
    0,
    'bodies in the plane of the scale bar (scale.planeOffsetM)',
  );
  const uPlaneOffsetM = take(
    scale.uPlaneOffsetM,
    assumed.uPlaneOffsetM,
    `plane of motion known to ${assumed.uPlaneOffsetM * 1000} mm (scale.uPlaneOffsetM; 5 mm at 2 m is 0.25 %)`,
  );
  if (scale.cameraDistanceM === undefined) {
    findings.push({
      level: 'caution',
      code: 'cameraDistanceMissing',
      text: `scale.cameraDistanceM is not stated: ${assumed.distanceHeights} heights of the picture were assumed. What plane offset and pitch do to lengths rests on it: state it.`,
    });
  }
  const patchPx = bodies.map((b) =>
    take(b.patchPx, assumed.patchPx, `patch of ${assumed.patchPx} px for body ${b.id} (bodies[].patchPx)`),
  );
  if (scale.plumb === undefined && scale.bars.length > 0) {
    take(undefined, 0, 'columns of the picture vertical to 0.5° (scale.plumb)');
  }
  const settledTether = tether && {
    ...tether,
    uLengthM: take(
      tether.uLengthM,
      assumed.uTetherLengthM,
      `length of the tether good to ${assumed.uTetherLengthM * 1000} mm (tether.uLengthM)`,
    ),
  };
  for (const what of siteAndAir(sheet)) take(undefined, 0, what);
  return {
    uCaptureRateRel,
    uSecondClockS,
    tether: settledTether,
    exposureS,
    rowTimeS: camera?.rowTimeS ?? 0,
    bars,
    fiducials,
    turn,
    uLensCornerRel,
    planeOffsetM,
    uPlaneOffsetM,
    uDownWithoutPlumbRad: assumed.uDownRad,
    patchPx,
    findings,
  };
}

type Take = (stated: number | undefined, value: number, what: string) => number;

function turnOf(scale: Sheet['scale'], take: Take): Settled['turn'] {
  const byFiducials = scale.bars.length === 0 && (scale.fiducials?.length ?? 0) >= 4;
  const uDeg = byFiducials ? assumed.uBoardDeg : assumed.uTurnDeg;
  const what = byFiducials
    ? 'plane of the fiducials plumb'
    : 'camera square to the plane of the fall, up and down,';
  const pitchDeg = scale.pitchDeg ?? 0;
  const uPitchDeg = scale.pitchFromFall
    ? uDeg
    : take(scale.uPitchDeg, uDeg, `${what} to ${uDeg}° (scale.uPitchDeg; 1° at 2 m is 0.43 % of g)`);
  // Turned aside, the fiducials' plane itself says so, and a vertical fall moves in it by one factor.
  const uYawDeg = byFiducials
    ? (scale.uYawDeg ?? 0)
    : take(
        scale.uYawDeg,
        assumed.uTurnDeg,
        `camera square to the plane of the fall, left and right, to ${assumed.uTurnDeg}° (scale.uYawDeg)`,
      );
  const radians = Math.PI / 180;
  return {
    pitchRad: pitchDeg * radians,
    uPitchRad: uPitchDeg * radians,
    yawRad: (scale.yawDeg ?? 0) * radians,
    uYawRad: uYawDeg * radians,
  };
}

function uLensOf(camera: Sheet['camera'], take: Take): number | null {
  if (camera?.lens === undefined) {
    if (camera?.straightLines !== undefined) return null;
    const u = assumed.uLensUncalibratedRel;
    return take(
      undefined,
      u,
      `lens without distortion, to ${100 * u} % at the picture's corner (camera.lens)`,
    );
  }
  if (camera.lens.uK1 !== undefined) return null;
  const u = assumed.uLensCalibratedRel;
  return take(undefined, u, `lens model good to ${100 * u} % at the picture's corner (camera.lens.uK1)`);
}

function uTimeOf(clock: Sheet['clock'], uSecondClockS: number, take: Take): number {
  switch (clock.kind) {
    case 'captureRate':
      return take(
        clock.uCaptureRateRel,
        assumed.uCaptureRateRel,
        `capture rate good to ${assumed.uCaptureRateRel} of its value (clock.uCaptureRateRel)`,
      );
    case 'secondClock':
      return uSecondClockS / clock.secondClock.intervalS;
    default:
      return take(
        clock.uTimeRel,
        assumed.uCaptureRateRel,
        `times of the footage good to ${assumed.uCaptureRateRel} of any interval (clock.uTimeRel)`,
      );
  }
}

function uIntervalOf(secondClock: SecondClock, take: Take): number {
  const uS = uIntervalUnstatedS(secondClock);
  return take(
    secondClock.uIntervalS,
    uS,
    `interval on the clock in the picture good to ${Number((1000 * uS).toPrecision(2))} ms, half a frame at each reading (clock.secondClock.uIntervalS)`,
  );
}

/** What is taken for a site that is stated in part, and for the air where the drag of a ball is taken off. */
function siteAndAir({ site, ambient, bodies }: Sheet): string[] {
  const { uGMps2 } = siteGravity(site);
  const ofSite = (): string[] => {
    if (site === undefined) return []; // a caution of its own
    if ('gMps2' in site) {
      return site.uGMps2 === undefined ? [`local gravity good to ${uGMps2} m/s² (site.uGMps2)`] : [];
    }
    return site.heightM === undefined
      ? [
          `a site somewhere from sea level to 1000 m, gravity good to ${Number(uGMps2.toPrecision(2))} m/s² (site.heightM)`,
        ]
      : [];
  };
  const dragTaken = bodies.some(
    (b) => b.role === 'reference' && b.diameterM !== undefined && b.massKg !== undefined,
  );
  return [...ofSite(), ...(dragTaken ? airOf(ambient).assumed.map((a) => `air of ${a}`) : [])];
}
