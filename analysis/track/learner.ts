import { jointLook } from './jointLook.ts';
import { REACH, samplesOf } from './layer.ts';
import { coveredAppearance, coveredModel, cutPlate, guessCoverage, type StillBody } from './learnBody.ts';
import type { BodyModel, Match, Plate } from './match.ts';
import { startMatting } from './matting.ts';
import type { Picture } from './track.ts';

/** A frame, or a part of one, with the body's zero at (xPx, yPx). */
export interface PlacedFrame {
  readonly picture: Picture;
  readonly plate: Plate | null;
  readonly brightness: number;
  readonly xPx: number;
  readonly yPx: number;
}

/** Keeps a body's model in front of a plate, and makes it better as the body passes over other background. */
export interface Learner {
  model(): BodyModel;
  /** One more frame with the body's zero at (xPx, yPx); true when the model has become better by it. */
  learn(
    picture: Picture,
    plate: Plate | null,
    brightness: number,
    xPx: number,
    yPx: number,
    blurPx: number,
  ): boolean;
  /**
   * A body that turns changes its look: takes the frame with the body's zero at (xPx, yPx) into a running mean. Aligned and
   * slow, it does not drift (shared limits: 0.0024 px over 300 frames), where a look replaced each frame would wander off.
   */
  refresh(picture: Picture, plate: Plate, brightness: number, xPx: number, yPx: number): void;
  /** Takes a look as its own, of a body that will change from it. */
  adopt(look: BodyModel): void;
  /** What a match with the present model says of the optics' point spread. */
  weigh(match: Match): void;
  /** Puts all that was learned into the model. */
  conclude(): void;
  /** Learns the look anew from all these frames together. */
  relearn(frames: readonly PlacedFrame[]): void;
}

/** A picture smeared by more than this says nothing of the coverage at the rim [px]. */
export const mostBlurPx = 0.45;
/** Nor is the background another before the body has moved this far [px]. */
const leastTravelPx = 0.5;
/** Frames after which nothing is left to learn. */
const mostFrames = 400;
/** Weight of one frame in the running mean of a turning body. */
const refreshWeight = 0.05;
/** Fewer than this and the first guess is better. */
const leastFrames = 8;
/** Variance of a usual point spread (σ = 0.7 px, and the pixel itself), and how well that is known [px²]. */
const usualSpreadPx2 = 0.7 ** 2 + 1 / 12;
const uSpreadPx2 = 0.4;

/** @returns null when the body hardly differs from the plate, so that it cannot be told from it */
export function startLearner(still: StillBody, plate: Plate): Learner | null {
  const behind = cutPlate(plate, still.centreX, still.centreY, still.half + REACH);
  const guess = guessCoverage(still, behind);
  if (!guess) return null;
  const matting = startMatting(still.half);
  let coverage = guess.coverage;
  let spreadPx2 = usualSpreadPx2;
  let spreadWeight = 1 / (uSpreadPx2 * uSpreadPx2);
  let appearance = coveredAppearance(still, behind, coverage, spreadPx2, null);
  let current = coveredModel(still.half, appearance, coverage, spreadPx2);
  let refineAt = leastFrames;
  let lastX = still.centreX;
  let lastY = still.centreY;

  const conclude = () => {
    if (matting.frames < leastFrames) return;
    coverage = matting.coverage(guess.coverage, guess.u, still.noise);
    const moving = { appearance: matting.appearance(coverage), frames: matting.frames };
    appearance = coveredAppearance(still, behind, coverage, spreadPx2, moving);
    current = coveredModel(still.half, appearance, coverage, spreadPx2);
  };

  return {
    model: () => current,
    learn(picture, behindNow, brightness, xPx, yPx, blurPx) {
      if (!behindNow || blurPx > mostBlurPx || matting.frames >= mostFrames) return false;
      if (Math.hypot(xPx - lastX, yPx - lastY) < leastTravelPx) return false;
      lastX = xPx;
      lastY = yPx;
      matting.add(picture, behindNow, brightness, xPx, yPx, { coverage, spreadPx2 });
      if (matting.frames < refineAt) return false;
      refineAt *= 2;
      conclude();
      return true;
    },
    refresh(picture, behindNow, brightness, xPx, yPx) {
      if (!matting.look(picture, behindNow, brightness, xPx, yPx, { coverage, spreadPx2 })) return;
      appearance = appearance.map((a, u) => {
        const now = matting.seen[u] - (1 - coverage[u]) * matting.behind[u];
        return a + refreshWeight * (now - a);
      });
      current = coveredModel(still.half, appearance, coverage, spreadPx2);
    },
    adopt(look) {
      if (!look.coverage) return;
      appearance = samplesOf(look.appearance);
      coverage = samplesOf(look.coverage);
      current = look;
    },
    weigh(match) {
      // Each match is a measurement of the spread about the one that its model had.
      spreadWeight += match.spreadWeight;
      spreadPx2 = Math.max(
        0,
        spreadPx2 + (match.spreadPull + (current.spreadPx2 - spreadPx2) * match.spreadWeight) / spreadWeight,
      );
    },
    conclude,
    relearn(frames) {
      const rim = { coverage, spreadPx2 };
      const samples = frames.flatMap(({ picture, plate: behindNow, brightness, xPx, yPx }) => {
        if (!behindNow || !matting.look(picture, behindNow, brightness, xPx, yPx, rim)) return [];
        // Pixels that something hides would spread over the whole sample.
        if (matting.behind.some(Number.isNaN)) return [];
        return [{ seen: matting.seen.slice(), behind: matting.behind.slice() }];
      });
      if (samples.length < leastFrames) return;
      ({ appearance, coverage } = jointLook(samples, { appearance, coverage }, guess, still.noise));
      current = coveredModel(still.half, appearance, coverage, spreadPx2);
    },
  };
}
