import type { WorldTrack } from './worldTrack.ts';

/** The instant the tether is straight. */
export interface Extension {
  readonly timeS: number;
  readonly uTimeS: number;
  /** Height of the tip at that instant [m] with its standard uncertainty. */
  readonly yM: number;
  readonly uYM: number;
  readonly seenAs: 'farthest from the anchor' | 'lowest place';
}

export type ExtensionFound =
  | { readonly ok: true; readonly extension: Extension }
  | { readonly ok: false; readonly reason: string };

/** What is known of the tether beforehand. */
export interface TetherShape {
  readonly lengthM?: number;
  /** Horizontal distance of the two ends before release. */
  readonly separationM?: number;
}

/** After its extreme the tip comes back by at least this share of the extreme; noise and a slack swing do not. */
const returnShare = 0.001;
/** With the length stated, the extreme lies between these shares of it (stretch, mark errors, heights of the two ends). */
const leastShare = 0.75;
const mostShare = 1.3;
/** Without it, a fall shorter than this is no extension [m]. */
const leastFallM = 0.02;

/**
 * Extension: with the separation stated, the first maximum of the tip's distance from the anchor, which hangs level with the
 * tip's start, on the side on which that maximum is nearest to the tether's length. Without it, the tip's lowest place, which
 * coincides to 0.05 % of the time for small separation (linked-tether integration, shared published values, section a) and is
 * later for a wide one (0.4 % at a separation of 0.3 of the length).
 *
 * Between frames the instant comes from the parabola through the three points about the extreme; because a tip can turn round
 * within a frame or two, it is taken to be uncertain by a rectangle of half a frame to either side.
 *
 * @param releaseS  release of the tip
 * @param startYM   height of the tip before release
 */
export function extensionOf(
  track: WorldTrack,
  releaseS: number,
  startYM: number,
  { lengthM, separationM }: TetherShape,
  frameTimeS: number,
): ExtensionFound {
  const first = track.timeS.findIndex((t) => t > releaseS);
  if (first < 0) return { ok: false, reason: 'the tip is not followed beyond its release' };
  const fallM = track.yM.map((y) => startYM - y);
  const lowest = firstMaximum(fallM, track.uYM, first, lengthM);

  let candidates: { k: number | null; reachM: Float64Array }[] = [{ k: lowest, reachM: fallM }];
  if (separationM !== undefined && lengthM !== undefined && separationM > 0) {
    const startXM = median(track.xM.slice(0, Math.max(1, first)));
    candidates = [separationM, -separationM].map((anchorXM) => {
      const reachM = fallM.map((f, i) => Math.hypot(track.xM[i] - startXM - anchorXM, f));
      return { k: firstMaximum(reachM, track.uYM, first, lengthM), reachM };
    });
  }
  const found = candidates.flatMap(({ k, reachM }) => (k === null ? [] : [{ k, reachM }]));
  if (found.length === 0) {
    const fell = Math.max(...fallM);
    return {
      ok: false,
      reason: `the tip is followed only until it has fallen ${fell.toFixed(3)} m and is not seen to turn back; film on past extension, or set the tip by hand where it was lost`,
    };
  }
  const off = ({ k, reachM }: { k: number; reachM: Float64Array }) => Math.abs(reachM[k] - (lengthM ?? 0));
  const best = found.reduce((a, b) => (off(b) < off(a) ? b : a));
  if (lengthM !== undefined && best.reachM[best.k] > mostShare * lengthM) {
    return {
      ok: false,
      reason: `the tip is ${best.reachM[best.k].toFixed(3)} m from where it hung, much more than the tether is long; check tether.lengthM and the scale`,
    };
  }
  const seenAs = candidates.length > 1 ? 'farthest from the anchor' : 'lowest place';
  return { ok: true, extension: atExtreme(track, best.reachM, best.k, frameTimeS, seenAs) };
}

/** Index of the first maximum from which the values come back; null when they do not. */
function firstMaximum(
  values: Float64Array,
  u: Float64Array,
  first: number,
  lengthM: number | undefined,
): number | null {
  let highest = first;
  for (let i = first; i < values.length; i++) {
    if (values[i] > values[highest]) highest = i;
    const enough = lengthM === undefined ? leastFallM : leastShare * lengthM;
    if (
      values[highest] > enough &&
      values[highest] - values[i] > Math.max(returnShare * values[highest], 8 * u[i])
    )
      return highest;
  }
  return null;
}

function median(values: Float64Array): number {
  const sorted = values.slice().sort();
  return sorted[sorted.length >> 1];
}

function atExtreme(
  { timeS, yM, uYM }: WorldTrack,
  reachM: Float64Array,
  k: number,
  frameTimeS: number,
  seenAs: Extension['seenAs'],
): Extension {
  const uTimeS = frameTimeS / Math.sqrt(12);
  if (k === 0 || k === yM.length - 1) return { timeS: timeS[k], uTimeS, yM: yM[k], uYM: uYM[k], seenAs };
  const t = [timeS[k - 1], timeS[k], timeS[k + 1]] as const;
  const atS = vertex(t, [reachM[k - 1], reachM[k], reachM[k + 1]]) ?? timeS[k];
  const height = parabola(t, [yM[k - 1], yM[k], yM[k + 1]], atS);
  const stepM = Math.max(Math.abs(yM[k] - yM[k - 1]), Math.abs(yM[k + 1] - yM[k]));
  return {
    timeS: atS,
    uTimeS,
    yM: height,
    // A tip that turns within a frame need not follow the parabola: a tenth of its way from frame to frame.
    uYM: Math.hypot(uYM[k], height - yM[k], stepM / 10),
    seenAs,
  };
}

type Three = readonly [number, number, number];

/** Divided differences of three points: the times need not be even. */
function differences(t: Three, v: Three): { first: number; second: number } {
  const first = (v[1] - v[0]) / (t[1] - t[0]);
  return { first, second: ((v[2] - v[1]) / (t[2] - t[1]) - first) / (t[2] - t[0]) };
}

function parabola(t: Three, v: Three, atS: number): number {
  const { first, second } = differences(t, v);
  return v[0] + (first + second * (atS - t[1])) * (atS - t[0]);
}

/** Time of the parabola's maximum between the outer points; null when it has none there. */
function vertex(t: Three, v: Three): number | null {
  const { first, second } = differences(t, v);
  if (second >= 0) return null;
  const atS = (t[0] + t[1]) / 2 - first / (2 * second);
  return atS >= t[0] && atS <= t[2] ? atS : null;
}
