import type { BodyState } from '../sheet/result.ts';
import { blurModel } from './blur.ts';
import { type BodyModel, type Match, makeMatcher } from './match.ts';
import { cutOut, halfOf, patchModel } from './patchModel.ts';
import { predict } from './predict.ts';
import type { Picture, WideSearch } from './track.ts';

/** A body as it was placed. */
export interface PlacedBody {
  readonly id: string;
  readonly frame: number;
  readonly xPx: number;
  readonly yPx: number;
  readonly patchPx: number;
  /** Places set by hand in later frames; they win. */
  readonly marks: readonly { readonly frame: number; readonly xPx: number; readonly yPx: number }[];
  /** Standard uncertainty of a place set by hand [px]. */
  readonly uMarkPx: number;
}

/** Where a body was found in one frame. */
export interface Sighting {
  readonly n: number;
  readonly state: BodyState;
  readonly xPx: number;
  readonly yPx: number;
  readonly uXPx: number;
  readonly uYPx: number;
  readonly score: number;
}

export interface Follower {
  /** Frames must come one after the other, from the frame in which the body was placed; backwards is as good as forwards. */
  push(n: number, picture: Picture): Sighting;
}

/** Frames of which the prediction is made. */
const memory = 5;
/** A body out of sight for longer is lost: what comes back may be another. */
export const longestGap = 20;
/** Below this the patch is not the body, whatever the light. */
const leastScore = 0.5;
/** A score that falls by this much, or a body this far from where it was expected, asks for a wide search to be sure. */
const doubtfulFall = 0.15;
const doubtfulPx = 2;

/**
 * Follows one body from frame to frame: prediction with constant acceleration, Gauss-Newton there; where that is doubtful a
 * wide search, and again Gauss-Newton. The place is that of the point that was marked.
 *
 * @param exposureShare  exposure as a share of the time from frame to frame
 */
export function startFollower(
  body: PlacedBody,
  first: Picture,
  search: WideSearch,
  noise: number,
  exposureShare: number,
): Follower {
  const half = halfOf(body.patchPx);
  const matcher = makeMatcher(half);
  const zeroX = Math.round(body.xPx);
  const zeroY = Math.round(body.yPx);
  const markX = body.xPx - zeroX;
  const markY = body.yPx - zeroY;
  const model = patchModel(first, zeroX, zeroY, half);
  const patch = patchPicture(first, zeroX, zeroY, half);
  const expectedNoise = Math.max(noise, 0.3);

  let frames: number[] = [];
  let xs: number[] = [];
  let ys: number[] = [];
  let usualScore = 1;
  let lost = false;

  const remember = (n: number, x: number, y: number) => {
    frames = [...frames, n].slice(-memory);
    xs = [...xs, x].slice(-memory);
    ys = [...ys, y].slice(-memory);
  };
  const sighting = (n: number, state: BodyState, m: Match | null): Sighting => ({
    n,
    state,
    xPx: m ? m.xPx + markX : Number.NaN,
    yPx: m ? m.yPx + markY : Number.NaN,
    // The patch comes from one frame and is as noisy as the frame it is held against: twice the variance.
    uXPx: m ? Math.sqrt(2 * m.varXPx2) : Number.NaN,
    uYPx: m ? Math.sqrt(2 * m.varYPx2) : Number.NaN,
    score: m ? m.score : Number.NaN,
  });

  /** The best acceptable match near where the body is expected. */
  const look = (picture: Picture, n: number): Match | null => {
    const px = predict(frames, xs, n);
    const py = predict(frames, ys, n);
    const gap = Math.abs(n - frames[frames.length - 1]);
    const speedPx = Math.hypot(px.rate, py.rate);
    const blurred: BodyModel = blurModel(model, px.rate * exposureShare, py.rate * exposureShare);
    const near = matcher.match(picture, blurred, px.value, py.value, expectedNoise, null, 1);
    const offPx = near ? Math.hypot(near.xPx - px.value, near.yPx - py.value) : Number.POSITIVE_INFINITY;
    const sure = near?.converged && gap === 1 && near.score > usualScore - doubtfulFall && offPx < doubtfulPx;
    if (near && sure) return near;

    // A body can change its speed by as much as it has (a tether that comes straight), or by a few pixels from rest.
    const radiusPx = Math.min(6 + 1.5 * speedPx + 3 * gap, 150);
    const seen = search(picture, patch, { xPx: px.value, yPx: py.value }, radiusPx);
    const wide = seen ? matcher.match(picture, blurred, seen.xPx, seen.yPx, expectedNoise, null, 1) : null;
    const acceptable = [near, wide].filter(
      (m): m is Match =>
        m?.converged === true &&
        m.score > Math.max(leastScore, usualScore - 0.4) &&
        Math.hypot(m.xPx - px.value, m.yPx - py.value) <= radiusPx + 2,
    );
    return acceptable.reduce<Match | null>(
      (best, m) => (best === null || m.score > best.score ? m : best),
      null,
    );
  };

  return {
    push(n, picture) {
      const mark = body.marks.find((m) => m.frame === n);
      if (mark) {
        // The track is split here: what was seen before says nothing about what comes after but the speed.
        const keepsSpeed = frames.length > 1 && !lost;
        const shiftX = keepsSpeed ? mark.xPx - markX - predict(frames, xs, n).value : 0;
        const shiftY = keepsSpeed ? mark.yPx - markY - predict(frames, ys, n).value : 0;
        xs = keepsSpeed ? xs.map((x) => x + shiftX) : [];
        ys = keepsSpeed ? ys.map((y) => y + shiftY) : [];
        frames = keepsSpeed ? frames : [];
        remember(n, mark.xPx - markX, mark.yPx - markY);
        lost = false;
        return {
          n,
          state: 'manual',
          xPx: mark.xPx,
          yPx: mark.yPx,
          uXPx: body.uMarkPx,
          uYPx: body.uMarkPx,
          score: Number.NaN,
        };
      }
      if (frames.length === 0) {
        const own = matcher.match(picture, model, zeroX, zeroY, expectedNoise, null, 1);
        remember(n, own?.xPx ?? zeroX, own?.yPx ?? zeroY);
        return sighting(n, own ? 'measured' : 'lost', own);
      }
      if (lost) return sighting(n, 'lost', null);
      const found = look(picture, n);
      if (!found) {
        lost = Math.abs(n - frames[frames.length - 1]) > longestGap;
        return sighting(n, 'lost', null);
      }
      remember(n, found.xPx, found.yPx);
      usualScore += 0.1 * (Math.min(found.score, 1) - usualScore);
      return sighting(n, 'measured', found);
    },
  };
}

function patchPicture(picture: Picture, centreX: number, centreY: number, half: number): Picture {
  const cut = cutOut(picture, centreX, centreY, half);
  const side = 2 * half + 1;
  return {
    widthPx: side,
    heightPx: side,
    bitDepth: picture.bitDepth,
    luma: picture.luma instanceof Uint8Array ? Uint8Array.from(cut) : Uint16Array.from(cut),
  };
}
