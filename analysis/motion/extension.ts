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
 * Between frames the instant is where the way in and the way back meet, each prolonged as a line from its last two frames;
 * because a tip can turn round within a frame, it is taken to be uncertain by a rectangle of half a frame to either side.
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
  const plain = { timeS: timeS[k], uTimeS, yM: yM[k], uYM: uYM[k], seenAs };
  if (k < 2 || k > yM.length - 3) return plain;
  const point = (i: number): Point => [timeS[i], reachM[i]];
  const before = Math.abs(lineAt(point(k - 2), point(k - 1), timeS[k]) - reachM[k]);
  const after = Math.abs(lineAt(point(k + 2), point(k + 1), timeS[k]) - reachM[k]);
  // The extreme frame lies on the way in or on the way back, whichever predicts it better: the turn is on its other side.
  const [first, second] = before <= after ? [k, k + 1] : [k - 1, k];
  const meetS = meeting(point(first - 1), point(first), point(second), point(second + 1));
  const atS = Math.min(timeS[second], Math.max(timeS[first], meetS ?? (timeS[first] + timeS[second]) / 2));
  const height = (i: number): Point => [timeS[i], yM[i]];
  const incoming = lineAt(height(first - 1), height(first), atS);
  // The tip does not go on along its line until it turns, nor does it turn before its lowest frame: between the two.
  const lowest = Math.min(yM[first], yM[second]);
  return {
    timeS: atS,
    uTimeS,
    yM: (incoming + lowest) / 2,
    uYM: Math.hypot(uYM[first], (incoming - lowest) / Math.sqrt(12), (yM[second] - yM[first]) / 10),
    seenAs,
  };
}

type Point = readonly [timeS: number, valueM: number];

function lineAt([ta, va]: Point, [tb, vb]: Point, atS: number): number {
  return vb + ((vb - va) / (tb - ta)) * (atS - tb);
}

/** Time at which the line through the first two points meets that through the last two; null when they do not turn. */
function meeting(a: Point, b: Point, c: Point, d: Point): number | null {
  const rateIn = (b[1] - a[1]) / (b[0] - a[0]);
  const rateBack = (d[1] - c[1]) / (d[0] - c[0]);
  if (rateIn <= rateBack) return null;
  return (c[1] - rateBack * c[0] - (b[1] - rateIn * b[0])) / (rateIn - rateBack);
}
