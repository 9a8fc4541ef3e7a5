import type { KeyValue } from '../sheet/result.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';
import { pitchEffect } from './pitchEffect.ts';

/** One thing that alone would make the ball's g differ as it does. */
interface Explanation {
  readonly cause: 'scale' | 'clock' | 'planeOffset' | 'pitch' | 'drag';
  /** By how much it would have to be off. */
  readonly size: number;
  readonly unit: '1' | 'm' | 'rad';
  /** That in units of its stated standard uncertainty; null where none is stated. */
  readonly timesU: number | null;
  /** For a person: what would have to be how much different. */
  readonly text: string;
}

export interface GravityAgreement {
  readonly offMps2: number;
  /** Standard uncertainty of the difference. */
  readonly uMps2: number;
  /** Difference in units of its standard uncertainty. */
  readonly timesU: number;
  readonly agrees: boolean;
  /** The likeliest first: those whose size is the fewest of their standard uncertainties. */
  readonly explanations: readonly Explanation[];
}

/** What is known of the rig, for what would explain a difference. Left out: that cause is not gone into. */
export interface RigGeometry {
  readonly cameraDistanceM?: number | undefined;
  /** Length of the fall that was used [m]. */
  readonly fallM: number;
  /** Change of g for a drag coefficient 10 % larger [m/s²]; 0: drag was not taken off. */
  readonly perDragMps2: number;
  readonly uScaleRel: number;
  readonly uTimeRel: number;
  readonly uPlaneOffsetM?: number | undefined;
  readonly uDragRel: number;
}

/** Beyond this many standard uncertainties the two are said to disagree (95 %). */
const agreementTimesU = 2;

/** The gravity check: g of the reference body against local gravity, and what would explain that they differ. */
export function gravityAgreement(
  ball: Pick<KeyValue, 'value' | 'u'>,
  local: LocalGravity,
  rig: RigGeometry,
): GravityAgreement {
  const offMps2 = ball.value - local.gMps2;
  const uMps2 = Math.hypot(ball.u, local.uGMps2);
  const timesU = Math.abs(offMps2) / uMps2;
  const explanations = explanationsOf(ball.value / local.gMps2, offMps2, rig).sort(
    (a, b) => (a.timesU ?? Number.POSITIVE_INFINITY) - (b.timesU ?? Number.POSITIVE_INFINITY),
  );
  return { offMps2, uMps2, timesU, agrees: timesU <= agreementTimesU, explanations };
}

function explanationsOf(ratio: number, offMps2: number, rig: RigGeometry): Explanation[] {
  const found: Explanation[] = [];
  const times = (size: number, u: number | undefined) =>
    u === undefined || !(u > 0) ? null : Math.abs(size) / u;
  // g goes with the length of a pixel, so the true length of the bar is the stated one over the ratio.
  const scale = 1 / ratio - 1;
  found.push({
    cause: 'scale',
    size: scale,
    unit: '1',
    timesU: times(scale, rig.uScaleRel),
    text: `a scale bar ${percent(scale)} ${scale > 0 ? 'longer' : 'shorter'} than stated`,
  });
  // … and with the square of the rate.
  const clock = 1 / Math.sqrt(ratio) - 1;
  found.push({
    cause: 'clock',
    size: clock,
    unit: '1',
    timesU: times(clock, rig.uTimeRel),
    text: `a capture rate ${percent(clock)} ${clock > 0 ? 'higher' : 'lower'} than stated`,
  });
  if (rig.cameraDistanceM !== undefined) {
    // A body in front of the bar's plane by z looks larger by D/(D - z).
    const offsetM = rig.cameraDistanceM * (1 - 1 / ratio);
    found.push({
      cause: 'planeOffset',
      size: offsetM,
      unit: 'm',
      timesU: times(offsetM, rig.uPlaneOffsetM),
      text: `the ball ${(1000 * Math.abs(offsetM)).toPrecision(2)} mm ${offsetM > 0 ? 'in front of' : 'behind'} the plane that was assumed`,
    });
    const perRad = pitchEffect(rig.cameraDistanceM, rig.fallM);
    const pitchRad = (ratio - 1) / perRad;
    if (Math.abs(pitchRad) < largestPitchRad) {
      found.push({
        cause: 'pitch',
        size: pitchRad,
        unit: 'rad',
        timesU: null,
        text: `a camera that looks ${((180 / Math.PI) * Math.abs(pitchRad)).toPrecision(2)}° ${pitchRad > 0 ? 'down on' : 'up at'} the plane of the fall`,
      });
    }
  }
  if (rig.perDragMps2 !== 0) {
    const drag = (-0.1 * offMps2) / rig.perDragMps2;
    if (drag > -1 && drag < largestDrag) {
      found.push({
        cause: 'drag',
        size: drag,
        unit: '1',
        timesU: times(drag, rig.uDragRel),
        text: `a drag coefficient ${percent(drag)} ${drag > 0 ? 'larger' : 'smaller'} than taken`,
      });
    }
  }
  return found;
}

/** No rig is out of level by more without its being seen, and the effect is no longer linear. */
const largestPitchRad = 0.2;
/** A drag coefficient more than three times the curve's is no explanation. */
const largestDrag = 2;

function percent(share: number): string {
  return `${Number((100 * Math.abs(share)).toPrecision(2))} %`;
}
