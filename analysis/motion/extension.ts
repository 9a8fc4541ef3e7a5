import type { WorldTrack } from './worldTrack.ts';

/** The instant the tether is straight, seen as the tip's lowest place. */
export interface Extension {
  readonly timeS: number;
  readonly uTimeS: number;
  /** Lowest height of the tip [m] with its standard uncertainty. */
  readonly yM: number;
  readonly uYM: number;
}

export type ExtensionFound =
  | { readonly ok: true; readonly extension: Extension }
  | { readonly ok: false; readonly reason: string };

/** The tip rebounds by at least this share of its fall within a few frames; noise and a slack swing do not. */
const reboundShare = 0.01;
/** With the length stated, the tip's fall at extension lies between these shares of it (separation, stretch, mark errors). */
const leastShare = 0.75;
const mostShare = 1.3;

/**
 * Extension: the tip's lowest place after release. For small separation it coincides with the first maximum of the distance
 * from the anchor to 0.05 % of the time (linked-tether integration, shared published values, section a). Between frames the
 * instant comes from the parabola through the three lowest points; because a tip turns round within a frame or two, it is
 * taken to be uncertain by a rectangle of half a frame to either side.
 *
 * @param releaseS   release of the tip
 * @param startYM    height of the tip before release
 * @param lengthM    tether length where it is stated
 */
export function extensionOf(
  track: WorldTrack,
  releaseS: number,
  startYM: number,
  lengthM: number | undefined,
  frameTimeS: number,
): ExtensionFound {
  const { timeS, yM, uYM } = track;
  const n = timeS.length;
  const first = timeS.findIndex((t) => t > releaseS);
  let lowest = first;
  for (let i = first; first >= 0 && i < n; i++) {
    if (yM[i] < yM[lowest]) lowest = i;
    const fall = startYM - yM[lowest];
    const rise = yM[i] - yM[lowest];
    const longEnough = lengthM === undefined ? fall > 0.02 : fall > leastShare * lengthM;
    if (!longEnough || rise < Math.max(reboundShare * fall, 8 * uYM[i])) continue;
    if (lengthM !== undefined && fall > mostShare * lengthM) {
      return {
        ok: false,
        reason: `the tip fell ${fall.toFixed(3)} m, much more than the tether is long; check tether.lengthM and the scale`,
      };
    }
    return { ok: true, extension: turningPoint(track, lowest, frameTimeS) };
  }
  const fell = first < 0 ? 0 : startYM - yM[lowest];
  return {
    ok: false,
    reason: `the tip is followed only until it has fallen ${fell.toFixed(3)} m and is not seen to rebound; film on past extension, or set the tip by hand where it was lost`,
  };
}

function turningPoint({ timeS, yM, uYM }: WorldTrack, k: number, frameTimeS: number): Extension {
  const whole = { timeS: timeS[k], uTimeS: frameTimeS / Math.sqrt(12), yM: yM[k], uYM: uYM[k] };
  if (k === 0 || k === yM.length - 1) return whole;
  // Divided differences: the times need not be even.
  const [ta, tb, tc] = [timeS[k - 1], timeS[k], timeS[k + 1]];
  const ab = (yM[k] - yM[k - 1]) / (tb - ta);
  const bc = (yM[k + 1] - yM[k]) / (tc - tb);
  const curvature = (bc - ab) / (tc - ta);
  if (curvature <= 0) return whole;
  const vertexS = (ta + tb) / 2 - ab / (2 * curvature);
  const at = Math.min(tc, Math.max(ta, vertexS));
  const yVertex = yM[k] + (ab + curvature * (at - ta)) * (at - tb);
  const stepS = Math.max(tb - ta, tc - tb);
  return {
    timeS: at,
    uTimeS: stepS / Math.sqrt(12),
    yM: Math.min(yVertex, yM[k]),
    // How far the tip went unseen below the lowest frame is itself the measure of how well that is known.
    uYM: Math.hypot(uYM[k], yM[k] - Math.min(yVertex, yM[k]), Math.abs(ab) * stepS * 0.1),
  };
}
