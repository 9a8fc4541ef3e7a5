import { type SecondClock, uIntervalUnstatedS } from '../clock/secondClock.ts';
import { airOf } from '../theory/air.ts';
import { siteGravity } from '../theory/normalGravity.ts';
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
  /** A tether measured along a steel rule. */
  uTetherLengthM: 0.001,
  /** A ball hung by eye in the plane of the bar. */
  uPlaneOffsetM: 0.002,
  /** A camera levelled with a spirit level. */
  uDownRad: 0.5 * (Math.PI / 180),
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
    planeOffsetM,
    uPlaneOffsetM,
    uDownWithoutPlumbRad: assumed.uDownRad,
    patchPx,
    findings,
  };
}

type Take = (stated: number | undefined, value: number, what: string) => number;

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
