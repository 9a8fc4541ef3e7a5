import { REACH } from './layer.ts';
import { coveredAppearance, coveredModel, cutPlate, guessCoverage, type StillBody } from './learnBody.ts';
import type { BodyModel, Plate } from './match.ts';
import { startMatting } from './matting.ts';
import type { Picture } from './track.ts';

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
  /** Puts all that was learned into the model. */
  conclude(): void;
  /** Forgets the frames, so that they can be learned again from better places; the model stays. */
  restart(): void;
}

/** A picture smeared by more than this says nothing of the coverage at the rim [px]. */
const mostBlurPx = 0.45;
/** Nor is the background another before the body has moved this far [px]. */
const leastTravelPx = 0.5;
/** Frames after which nothing is left to learn. */
const mostFrames = 400;
/** Weight of one frame in the running mean of a turning body. */
const refreshWeight = 0.05;
/** Fewer than this and the first guess is better. */
const leastFrames = 8;

/** @returns null when the body hardly differs from the plate, so that it cannot be told from it */
export function startLearner(still: StillBody, plate: Plate): Learner | null {
  const behind = cutPlate(plate, still.centreX, still.centreY, still.half + REACH);
  const guess = guessCoverage(still, behind);
  if (!guess) return null;
  let matting = startMatting(still.half);
  let coverage = guess.coverage;
  let appearance = coveredAppearance(still, behind, coverage, null);
  let current = coveredModel(still.half, appearance, coverage);
  let refineAt = leastFrames;
  let lastX = still.centreX;
  let lastY = still.centreY;

  const conclude = () => {
    if (matting.frames < leastFrames) return;
    coverage = matting.coverage(guess.coverage, guess.u, still.noise);
    appearance = coveredAppearance(still, behind, coverage, {
      appearance: matting.appearance(coverage),
      frames: matting.frames,
    });
    current = coveredModel(still.half, appearance, coverage);
  };

  return {
    model: () => current,
    learn(picture, behindNow, brightness, xPx, yPx, blurPx) {
      if (!behindNow || blurPx > mostBlurPx || matting.frames >= mostFrames) return false;
      if (Math.hypot(xPx - lastX, yPx - lastY) < leastTravelPx) return false;
      lastX = xPx;
      lastY = yPx;
      matting.add(picture, behindNow, brightness, xPx, yPx);
      if (matting.frames < refineAt) return false;
      refineAt *= 2;
      conclude();
      return true;
    },
    refresh(picture, behindNow, brightness, xPx, yPx) {
      if (!matting.look(picture, behindNow, brightness, xPx, yPx)) return;
      appearance = appearance.map((a, u) => {
        const now = matting.seen[u] - (1 - coverage[u]) * matting.behind[u];
        return a + refreshWeight * (now - a);
      });
      current = coveredModel(still.half, appearance, coverage);
    },
    conclude,
    restart() {
      matting = startMatting(still.half);
      refineAt = Number.POSITIVE_INFINITY; // concluded once, at the end
    },
  };
}
