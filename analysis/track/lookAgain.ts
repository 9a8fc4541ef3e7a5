import { blurModel } from './blur.ts';
import type { Cuttings } from './cuttings.ts';
import { hiddenAtRest } from './hidden.ts';
import { REACH, type WindowPoint } from './layer.ts';
import { cutPlate, type StillBody } from './learnBody.ts';
import { type Learner, mostBlurPx, type PlacedFrame } from './learner.ts';
import type { BodyModel, Match, Matcher, Plate } from './match.ts';
import { asAtRest, type Pose, posedModel } from './pose.ts';
import { predict } from './predict.ts';
import { leastScore, type PlacedBody, type Sighting } from './sighting.ts';

/** What is known of a body when its last frame has come. */
export interface Known {
  readonly body: PlacedBody;
  readonly still: StillBody;
  readonly plate: Plate | null;
  readonly model: BodyModel;
  readonly learner: Learner | null;
  readonly matcher: Matcher;
  readonly cuttings: Cuttings;
  /** Sightings, from the first, in which the body looked as at rest. */
  readonly steady: number;
  /** … and up to which turn and growth were all that changed it. */
  readonly followable: number;
  /** Turn and growth by frame, where they are not as at rest; made better here. And the centre of a body that turns. */
  readonly poses: Map<number, Pose>;
  readonly turnsAbout: WindowPoint | null;
  readonly exposureShare: number;
  readonly sighting: (n: number, state: 'measured', match: Match) => Sighting;
}

/** Frames from which a look is learned, and their pixels together: more would cost time and tell little. */
const mostLookFrames = 120;
const leastLookFrames = 30;
const mostLookPixels = 200_000;

/** A look is learned from frames in which the body is turned by less than this: a tenth of a pixel at the rim of a usual marker. */
const mostTurnRad = 0.01;
/** A turn found larger than this is put into the model before it is trusted: the equations take it for small. */
const farTurnRad = 0.02;

/**
 * Matches the kept frames again. The first of them were matched with what was known of the body then; now its look is learned
 * from all of them together, twice, each time from better places.
 *
 * @returns the sightings, with better places where there are
 */
export function lookAgain(sightings: readonly Sighting[], known: Known): Sighting[] {
  const { learner } = known;
  learner?.conclude();
  const once = matchedAgain(sightings, learner?.model() ?? known.model, known);
  if (!learner) return once.sightings;
  learner.relearn(sharpFrames(once.sightings, known));
  disregardHidden(once.sightings, learner.model(), known);
  const { sightings: better, matched } = matchedAgain(once.sightings, learner.model(), known);
  return fromMark(onOneZero(sightings, better, matched), known);
}

function matchedAgain(
  sightings: readonly Sighting[],
  model: BodyModel,
  { body, still, matcher, cuttings, followable, poses, turnsAbout, exposureShare, learner, sighting }: Known,
): { sightings: Sighting[]; matched: Set<number> } {
  const speeds = speedsOf(sightings);
  const again = [...sightings];
  const matched = new Set<number>();
  const markX = body.xPx - still.centreX;
  const markY = body.yPx - still.centreY;
  // From the last frame to the first: a turn is known late, and goes back to what it was at rest.
  for (const [i, cut] of cuttings.of(sightings.slice(0, followable)).reverse()) {
    const s = sightings[i];
    const x = s.xPx - markX - cut.left;
    const y = s.yPx - markY - cut.top;
    const matchIn = (pose: Pose): Match | null => {
      const posed = turnsAbout ? posedModel(model, pose, turnsAbout) : model;
      const blurred = blurModel(posed, speeds[i].x * exposureShare, speeds[i].y * exposureShare);
      return matcher.match(cut.picture, blurred, x, y, still.noise, cut.plate, cut.brightness, turnsAbout);
    };
    let pose = turnsAbout ? poseBefore(poses, s.n) : asAtRest;
    let m = matchIn(pose);
    if (m && turnsAbout && Math.abs(m.turnRad) > farTurnRad) {
      pose = turned(pose, m);
      m = matchIn(pose);
    }
    if (!m?.converged || m.score <= leastScore) continue;
    learner?.weigh(m);
    if (turnsAbout) poses.set(s.n, turned(pose, m));
    again[i] = sighting(s.n, 'measured', { ...m, xPx: m.xPx + cut.left, yPx: m.yPx + cut.top });
    matched.add(i);
  }
  return { sightings: again, matched };
}

/** The pose in a frame as the two after it let expect it, else as it was found before. */
function poseBefore(poses: ReadonlyMap<number, Pose>, n: number): Pose {
  const next = poses.get(n + 1);
  const afterNext = poses.get(n + 2);
  if (!next || !afterNext) return poses.get(n) ?? next ?? asAtRest;
  return {
    turnRad: 2 * next.turnRad - afterNext.turnRad,
    growth: 2 * next.growth - afterNext.growth,
  };
}

function turned(pose: Pose, by: Match): Pose {
  return { turnRad: pose.turnRad + by.turnRad, growth: pose.growth + by.growth };
}

/** Kept frames in which the body is not smeared, spread evenly over those there are, with its place in them. */
function sharpFrames(
  sightings: readonly Sighting[],
  { body, still, cuttings, steady, poses, exposureShare }: Known,
): PlacedFrame[] {
  const speeds = speedsOf(sightings);
  const turnOf = (s: Sighting) => poses.get(s.n)?.turnRad ?? 0;
  const atRest = sightings.slice(0, still.frames).reduce((sum, s) => sum + turnOf(s), 0) / still.frames;
  const sharp = cuttings
    .of(sightings.slice(0, steady))
    .filter(([i]) => exposureShare * Math.hypot(speeds[i].x, speeds[i].y) <= mostBlurPx)
    .filter(([i]) => Math.abs(turnOf(sightings[i]) - atRest) <= mostTurnRad);
  const wanted = mostLookPixels / (2 * still.half + 1) ** 2;
  const most = Math.min(mostLookFrames, Math.max(leastLookFrames, Math.round(wanted)));
  const every = Math.max(1, sharp.length / most);
  return Array.from({ length: Math.min(sharp.length, most) }, (_, k) => {
    const [i, cut] = sharp[Math.floor(k * every)];
    const s = sightings[i];
    return {
      ...cut,
      xPx: s.xPx - (body.xPx - still.centreX) - cut.left,
      yPx: s.yPx - (body.yPx - still.centreY) - cut.top,
    };
  });
}

/** Takes the pixels out in which something hides a part of the body while it rests. */
function disregardHidden(
  sightings: readonly Sighting[],
  model: BodyModel,
  { body, still, plate, cuttings }: Known,
): void {
  const rest = sightings.slice(0, still.frames).filter((s) => s.state === 'measured');
  if (!plate || rest.length === 0) return;
  const behind = cutPlate(plate, still.centreX, still.centreY, still.half + REACH);
  const mean = (of: (s: Sighting) => number) => rest.reduce((sum, s) => sum + of(s), 0) / rest.length;
  const dx = mean((s) => s.xPx) - body.xPx;
  const dy = mean((s) => s.yPx) - body.yPx;
  const hidden = hiddenAtRest(still, behind, model, dx, dy);
  if (hidden) cuttings.disregard(still.centreX, still.centreY, 2 * still.half + 1, hidden);
}

/** Moves the track so that the body at rest is where it was marked: the learned look's own zero is a little beside it. */
function fromMark(sightings: readonly Sighting[], { body, still }: Known): Sighting[] {
  const rest = sightings.slice(0, still.frames).filter((s) => s.state === 'measured');
  if (rest.length === 0) return [...sightings];
  const dx = body.xPx - rest.reduce((sum, s) => sum + s.xPx, 0) / rest.length;
  const dy = body.yPx - rest.reduce((sum, s) => sum + s.yPx, 0) / rest.length;
  return sightings.map((s) => (s.state === 'measured' ? { ...s, xPx: s.xPx + dx, yPx: s.yPx + dy } : s));
}

/**
 * A look learned anew can have its zero a few hundredths of a pixel beside the old one's. Sightings that were not matched again
 * (no room was left to keep their frame, or it did not match) are moved to the new zero, or the track would have a step.
 */
function onOneZero(
  before: readonly Sighting[],
  after: readonly Sighting[],
  matched: ReadonlySet<number>,
): Sighting[] {
  if (matched.size === 0) return [...after];
  const middle = (values: number[]) => values.sort((a, b) => a - b)[values.length >> 1];
  const moved = [...matched];
  const dx = middle(moved.map((i) => after[i].xPx - before[i].xPx));
  const dy = middle(moved.map((i) => after[i].yPx - before[i].yPx));
  return after.map((s, i) =>
    s.state !== 'measured' || matched.has(i) ? s : { ...s, xPx: before[i].xPx + dx, yPx: before[i].yPx + dy },
  );
}

/** Speed of the body at each sighting [px per frame], from the parabola through its neighbours; zero where it stands alone. */
function speedsOf(sightings: readonly Sighting[]): { x: number; y: number }[] {
  return sightings.map((s, i) => {
    const near = sightings
      .slice(Math.max(0, i - 2), i + 3)
      .filter((o) => o.state === 'measured' || o.state === 'manual');
    if (near.length < 2 || Number.isNaN(s.xPx)) return { x: 0, y: 0 };
    const frames = near.map((o) => o.n);
    // Backwards in time the frames descend: the rate is per frame of the footage all the same.
    return {
      x: predict(
        frames,
        near.map((o) => o.xPx),
        s.n,
      ).rate,
      y: predict(
        frames,
        near.map((o) => o.yPx),
        s.n,
      ).rate,
    };
  });
}
