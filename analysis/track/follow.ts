import type { BodyState } from '../sheet/result.ts';
import { blurModel } from './blur.ts';
import { type BodyView, withoutCovered } from './bodyView.ts';
import { startCuttings } from './cuttings.ts';
import { makeLayer, makeSampler, sampledFor, type WindowPoint } from './layer.ts';
import { cutPlate, type StillBody } from './learnBody.ts';
import { startLearner } from './learner.ts';
import { lookAgain } from './lookAgain.ts';
import { type BodyModel, type Match, makeMatcher, type Plate } from './match.ts';
import { cutOut, roundMask } from './patchModel.ts';
import { brightnessOf } from './plate.ts';
import { asAtRest, centreOf, type Pose, posedModel } from './pose.ts';
import { predict, predictLine } from './predict.ts';
import { leastScore, longestGap, type PlacedBody, type Sighting } from './sighting.ts';
import type { Picture, WideSearch } from './track.ts';
import { makeTurnGauge } from './turning.ts';

export interface Follower {
  /**
   * Frames must come one after the other, from the frame in which the body was placed; backwards is as good as forwards.
   *
   * @param plateNow  the plate as the camera sees it in this frame, where it is not that of the surroundings
   * @param inFront   other bodies that cover a part of this one
   */
  push(n: number, picture: Picture, plateNow?: Plate, inFront?: readonly BodyView[]): void;
  /** Where the body's zero should be in a frame to come; null where nothing can be said. */
  expected(n: number): Expected | null;
  /** Where it was found in the frame pushed last, if it was in frame n. */
  foundIn(n: number): PlaceOfZero | null;
  /** The body as it would look there. */
  viewAt(at: PlaceOfZero): BodyView;
  /** Everything that was seen, in the order of the frames pushed: the best that is known after the last frame. */
  finish(): Sighting[];
}

interface PlaceOfZero {
  readonly xPx: number;
  readonly yPx: number;
}

export interface Expected extends PlaceOfZero {
  /** The body may be this far from there: 0 when it was seen just now. */
  readonly reachPx: number;
  readonly half: number;
}

/** Places of which the next frame is predicted: the acceleration of a tip changes too fast for more. */
const nextFrom = 3;
/** Places of which a prediction across a gap is made: there noise counts for more than the change of acceleration. */
const acrossGapFrom = 8;
/** By so much the usual score sinks before a body is taken to turn. */
const turningFall = 0.01;
/** … if the residual looks like a turn by at least this much. */
const turnLikeness = 0.4;
/** By so much more it sinks, with turn and growth in the model, before its look is taken to change in another way. */
const changingFall = 0.03;
/** Light on a body changes by less than this factor from frame to frame; noise fitted as the body has hardly any contrast. */
const leastGain = 0.4;
/** A score that falls by this much, or a body this far from where it was expected, asks for a wide search to be sure. */
const doubtfulFall = 0.15;
const doubtfulPx = 2;
/** By so much a body further off must score better than one where it was expected. */
const clearlyBetter = 0.2;

/** What a follower is given besides the body. */
export interface Surroundings {
  /** The frame in which the body was placed. */
  readonly first: Picture;
  /** What was seen of the body while it rested. */
  readonly still: StillBody;
  /** The background; null when the camera moves or there are too few frames for it. */
  readonly plate: Plate | null;
  readonly search: WideSearch;
  /** Exposure as a share of the time from frame to frame. */
  readonly exposureShare: number;
}

/**
 * Follows one body from frame to frame: prediction with constant acceleration, Gauss-Newton there; where that is doubtful a
 * wide search, and again Gauss-Newton. The place is that of the point that was marked.
 *
 * In front of a plate the body's coverage is first guessed from its rest frames and then learned from the frames in which it
 * passes over other background; without a plate the patch is matched as it is.
 */
export function startFollower(
  body: PlacedBody,
  { first, still, plate, search, exposureShare }: Surroundings,
): Follower {
  const { half, centreX, centreY, noise } = still;
  const matcher = makeMatcher(half);
  const sampler = makeSampler(half);
  const markX = body.xPx - centreX;
  const markY = body.yPx - centreY;
  const learner = plate ? startLearner(still, plate) : null;
  const usedPlate = learner ? plate : null;
  const meanBehind = usedPlate ? meanOf(cutPlate(usedPlate, centreX, centreY, half)) : 0;
  let model = learner?.model() ?? meanPatchModel(still);
  const patch = patchPicture(first, centreX, centreY, half);
  // The rest frames' mean carries noise of its own, the same in all frames.
  const variances = 1 + 1 / still.frames;

  let frames: number[] = [];
  let xs: number[] = [];
  let ys: number[] = [];
  let usualScore = 1;
  const gauge = makeTurnGauge(half);
  let bestScore = 0;
  /** Where the body turns about, once it does; its look can change in other ways too, and is then followed by a running mean. */
  let turnsAbout: WindowPoint | null = null;
  let centre: WindowPoint | null = null;
  let changing = false;
  const poses = new Map<number, Pose>();
  const poseOf = (n: number) => poses.get(n) ?? asAtRest;
  /** Sightings up to which the body looked as at rest, and up to which turn and growth were all that changed it. */
  let steady = 0;
  let followable = 0;
  let lost = false;

  const remember = (n: number, x: number, y: number) => {
    frames = [...frames, n].slice(-acrossGapFrom);
    xs = [...xs, x].slice(-acrossGapFrom);
    ys = [...ys, y].slice(-acrossGapFrom);
  };
  const sighting = (n: number, state: BodyState, m: Match | null): Sighting => ({
    n,
    state,
    xPx: m ? m.xPx + markX : Number.NaN,
    yPx: m ? m.yPx + markY : Number.NaN,
    uXPx: m ? Math.sqrt(variances * m.varXPx2) : Number.NaN,
    uYPx: m ? Math.sqrt(variances * m.varYPx2) : Number.NaN,
    score: m ? m.score : Number.NaN,
  });
  const sightings: Sighting[] = [];
  const cuttings = startCuttings(half);

  const predicted = (n: number) => {
    const gap = Math.abs(n - frames[frames.length - 1]);
    const last = gap === 1 ? -nextFrom : -acrossGapFrom;
    const x = predict(frames.slice(last), xs.slice(last), n);
    const y = predict(frames.slice(last), ys.slice(last), n);
    // A body can change its speed by as much as it has (a tether that comes straight), or by a few pixels from rest.
    const radiusPx = Math.min(6 + 1.5 * Math.hypot(x.rate, y.rate) + 3 * gap, 150);
    return { x, y, gap, radiusPx };
  };

  /** Turns go on as they did over the last frames. */
  const predictedPose = (n: number): Pose => {
    const seen = frames.slice(-nextFrom);
    const of = (value: (pose: Pose) => number) =>
      seen.length < 2
        ? value(poseOf(seen[0]))
        : predictLine(
            seen,
            seen.map((f) => value(poseOf(f))),
            n,
          );
    return { turnRad: of((p) => p.turnRad), growth: of((p) => p.growth) };
  };

  /** The best acceptable match near where the body is expected. */
  const look = (picture: Picture, n: number, behind: Plate | null, brightness: number): Match | null => {
    const { x: px, y: py, gap, radiusPx } = predicted(n);
    const pose = turnsAbout ? predictedPose(n) : asAtRest;
    const posed = turnsAbout ? posedModel(model, pose, turnsAbout) : model;
    const blurred = blurModel(posed, px.rate * exposureShare, py.rate * exposureShare);
    const match = (x: number, y: number): Match | null => {
      const m = matcher.match(picture, blurred, x, y, noise, behind, brightness, turnsAbout);
      return m && { ...m, turnRad: pose.turnRad + m.turnRad, growth: pose.growth + m.growth };
    };
    const near = match(px.value, py.value);
    const offPx = near ? Math.hypot(near.xPx - px.value, near.yPx - py.value) : Number.POSITIVE_INFINITY;
    const sure = near?.converged && gap === 1 && near.score > usualScore - doubtfulFall && offPx < doubtfulPx;
    if (near && sure) return near;

    // A body that must have left the picture is not looked for in it.
    if (px.value < 0 || py.value < 0 || px.value > picture.widthPx - 1 || py.value > picture.heightPx - 1)
      return null;
    const seen = search(picture, patch, { xPx: px.value, yPx: py.value }, radiusPx);
    const wide = seen ? match(seen.xPx, seen.yPx) : null;
    const acceptable = (m: Match | null): m is Match =>
      m?.converged === true &&
      m.score > Math.max(leastScore, usualScore - 0.4) &&
      m.gain > leastGain &&
      m.gain < 1 / leastGain &&
      Math.hypot(m.xPx - px.value, m.yPx - py.value) <= radiusPx + 2;
    if (!acceptable(wide)) return acceptable(near) ? near : null;
    // Links of a chain are alike: one further off must be clearly the better likeness.
    return acceptable(near) && near.score > wide.score - clearlyBetter ? near : wide;
  };

  /** A score that has sunk, with the blur in the model, and a residual that a turn of the body would leave. */
  const turns = (picture: Picture, found: Match, behind: Plate | null, brightness: number): boolean => {
    if (!behind || usualScore > bestScore - turningFall) return false;
    return gauge.likeness(picture, model, found, behind, brightness) > turnLikeness;
  };

  /** Where the body is in the next frame. */
  const follow = (
    n: number,
    picture: Picture,
    plateNow: Plate | null,
    inFront: readonly BodyView[],
  ): Sighting => {
    const brightness = plateNow ? brightnessOf(picture, plateNow) : 1;
    const covered = inFront.length > 0;
    const behind = covered ? withoutCovered(picture, plateNow, inFront) : plateNow;
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
    if (lost) return sighting(n, 'lost', null);
    const found =
      frames.length === 0
        ? matcher.match(picture, model, centreX, centreY, noise, behind, brightness)
        : look(picture, n, behind, brightness);
    if (!found) {
      lost = frames.length === 0 || Math.abs(n - frames[frames.length - 1]) > longestGap;
      return sighting(n, 'lost', null);
    }
    remember(n, found.xPx, found.yPx);
    usualScore += 0.1 * (Math.min(found.score, 1) - usualScore);
    learner?.weigh(found);
    cuttings.keep(n, picture, behind, brightness, found.xPx, found.yPx);
    const blurPx = exposureShare * Math.hypot(predict(frames, xs, n).rate, predict(frames, ys, n).rate);
    if (turnsAbout) poses.set(n, { turnRad: found.turnRad, growth: found.growth });
    if (covered) return sighting(n, 'measured', found);
    bestScore = Math.max(bestScore, usualScore);
    if (turnsAbout && !changing && usualScore < bestScore - turningFall - changingFall) {
      learner?.adopt(posedModel(model, poseOf(n), turnsAbout));
      changing = true;
      turnsAbout = null;
    } else if (
      !turnsAbout &&
      !changing &&
      sightings.length > still.frames &&
      turns(picture, found, behind, brightness)
    ) {
      centre = centreOf(model, meanBehind, noise);
      turnsAbout = centre;
      usualScore = bestScore;
    }
    if (learner && behind && changing) {
      if (found.score > leastScore) learner.refresh(picture, behind, brightness, found.xPx, found.yPx);
      model = learner.model();
    } else if (!turnsAbout && learner?.learn(picture, behind, brightness, found.xPx, found.yPx, blurPx))
      model = learner.model();
    if (!turnsAbout && !changing) steady = sightings.length + 1;
    if (!changing) followable = sightings.length + 1;
    return sighting(n, 'measured', found);
  };

  return {
    push(n, picture, plateNow, inFront = []) {
      sightings.push(follow(n, picture, usedPlate && (plateNow ?? usedPlate), inFront));
    },
    expected(n) {
      if (lost || frames.length === 0 || body.marks.some((m) => m.frame === n)) return null;
      const { x, y, gap, radiusPx } = predicted(n);
      return { xPx: x.value, yPx: y.value, reachPx: gap === 1 ? 0 : radiusPx, half };
    },
    foundIn(n) {
      const at = frames.length - 1;
      return frames[at] === n ? { xPx: xs[at], yPx: ys[at] } : null;
    },
    viewAt({ xPx, yPx }) {
      const [wholeX, wholeY] = [Math.round(xPx), Math.round(yPx)];
      const appearance = sampledFor(half);
      const coverage = sampledFor(half);
      sampler.sample(model.appearance, xPx - wholeX, yPx - wholeY, appearance);
      if (model.coverage) sampler.sample(model.coverage, xPx - wholeX, yPx - wholeY, coverage);
      return {
        half,
        noise,
        left: wholeX - half,
        top: wholeY - half,
        appearance: appearance.value,
        coverage: model.coverage ? coverage.value : model.mask,
      };
    },
    finish() {
      return lookAgain(sightings, {
        body,
        still,
        plate: usedPlate,
        model,
        learner,
        matcher,
        cuttings,
        steady,
        followable,
        poses,
        turnsAbout: centre,
        exposureShare,
        sighting,
      });
    },
  };
}

function meanOf(values: Float64Array): number {
  return values.reduce((sum, v) => sum + v, 0) / values.length;
}

function meanPatchModel(still: StillBody): BodyModel {
  return {
    half: still.half,
    appearance: makeLayer(still.mean.slice(), still.half),
    coverage: null,
    spreadPx2: 0,
    mask: roundMask(still.half),
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
