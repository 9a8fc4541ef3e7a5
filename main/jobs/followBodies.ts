import { settle } from '../../analysis/sheet/assumptions.ts';
import type { Sheet, SheetBody } from '../../analysis/sheet/sheet.ts';
import { bridgeGaps } from '../../analysis/track/bridge.ts';
import { type Follower, type PlacedBody, type Sighting, startFollower } from '../../analysis/track/follow.ts';
import { halfOf } from '../../analysis/track/patchModel.ts';
import type { Picture, Track, WideSearch } from '../../analysis/track/track.ts';
import { trackability } from '../../analysis/track/trackability.ts';
import { trackOf } from '../../analysis/track/trackOf.ts';
import type { FootageIndex, FrameSource } from '../footage/frameSource.ts';
import { Refusal } from '../refusal.ts';

export interface Followed {
  readonly index: FootageIndex;
  readonly firstFrame: number;
  readonly lastFrame: number;
  readonly tracks: readonly Track[];
}

/** Standard uncertainty of a place set by hand [px] where nothing better is known. */
const uMarkPx = 0.5;

/**
 * Follows every body of a sheet through the footage: forwards in the one pass in which the footage is indexed, then backwards
 * for bodies that were placed in a later frame than the first.
 *
 * @throws Refusal (status 2) for marks outside the picture, a body without features, frames that do not exist
 */
export async function followBodies(
  source: FrameSource,
  sheet: Sheet,
  search: WideSearch,
  signal: AbortSignal | undefined,
  frameDone: (framesDone: number, framesTotal: number | null) => void,
): Promise<Followed> {
  const { firstFrame } = sheet.footage;
  const wantedLast = sheet.footage.lastFrame ?? Number.POSITIVE_INFINITY;
  const exposureShare = exposureShareOf(sheet);
  const patches = settle(sheet).patchPx;
  const runs = sheet.bodies.map((body, i) => ({
    placed: placedBody(body, patches[i]),
    follower: null as Follower | null,
    sightings: [] as Sighting[],
  }));

  const index = await source.index({
    signal,
    onFrame({ n, picture }, expectedCount) {
      if (n === firstFrame) refuseMarksOutside(sheet, picture);
      if (n >= firstFrame && n <= wantedLast) {
        for (const run of runs) {
          if (n === run.placed.frame) run.follower = followerAt(run.placed, picture, search, exposureShare);
          if (run.follower) run.sightings.push(run.follower.push(n, picture));
        }
      }
      frameDone(n + 1, expectedCount);
    },
  });

  const damaged = index.findings.some((f) => f.code === 'footageDamaged');
  const lastFrame = Math.min(wantedLast, index.frameCount - 1);
  if (
    firstFrame > lastFrame ||
    (wantedLast !== Number.POSITIVE_INFINITY && lastFrame < wantedLast && !damaged)
  ) {
    throw new Refusal(
      'framesMissing',
      2,
      `footage: frames ${firstFrame} to ${Number.isFinite(wantedLast) ? wantedLast : 'the end'} are to be reduced, but the footage has frames 0 to ${index.frameCount - 1}; correct firstFrame and lastFrame.`,
    );
  }
  if (lastFrame - firstFrame < 2) {
    throw new Refusal(
      'framesTooFew',
      3,
      `footage: only ${lastFrame - firstFrame + 1} frames can be read; a drop cannot be reduced from so few.`,
    );
  }

  for (const run of runs) {
    if (run.placed.frame > lastFrame) {
      throw new Refusal(
        'bodyOutsideFrames',
        2,
        `bodies: "${run.placed.id}" is placed in frame ${run.placed.frame}, but the last frame that can be read is ${lastFrame}.`,
      );
    }
    if (run.placed.frame > firstFrame)
      run.sightings.unshift(
        ...(await followBack(source, run.placed, firstFrame, search, exposureShare, signal)),
      );
  }
  const tracks = runs.map((run) =>
    trackOf(run.placed.id, bridgeGaps(run.sightings.filter((s) => s.n <= lastFrame))),
  );
  return { index, firstFrame, lastFrame, tracks };
}

function placedBody(body: SheetBody, patchPx: number): PlacedBody {
  return {
    id: body.id,
    frame: body.frame,
    xPx: body.x,
    yPx: body.y,
    patchPx,
    marks: (body.marks ?? []).map((m) => ({ frame: m.frame, xPx: m.x, yPx: m.y })),
    uMarkPx,
  };
}

/** Exposure as a share of the frame time, where the clock states a rate; other clocks are known only after indexing. */
function exposureShareOf(sheet: Sheet): number {
  const { clock, camera } = sheet;
  if (clock.kind !== 'captureRate' || camera?.exposureS === undefined) return 0;
  return camera.exposureS * clock.captureRateHz;
}

function followerAt(body: PlacedBody, picture: Picture, search: WideSearch, exposureShare: number): Follower {
  const half = halfOf(body.patchPx);
  const where = `bodies: "${body.id}" at x ${body.xPx}, y ${body.yPx} in frame ${body.frame}`;
  if (2 * half + 1 > Math.min(picture.widthPx, picture.heightPx)) {
    throw new Refusal(
      'patchTooLarge',
      2,
      `${where}: its patch of ${body.patchPx} px is larger than the picture (${picture.widthPx} × ${picture.heightPx} px); make patchPx smaller.`,
    );
  }
  const judged = trackability(picture, Math.round(body.xPx), Math.round(body.yPx), half);
  if (!judged.ok) {
    const reason =
      judged.reason === 'featureless'
        ? 'the patch shows nothing but an even background'
        : 'the patch shows only a straight edge, along which it could slide';
    throw new Refusal(
      'bodyFeatureless',
      2,
      `${where}: ${reason}; place it on the body, or make patchPx larger.`,
    );
  }
  return startFollower(body, picture, search, judged.noise, exposureShare);
}

/** Frames from the one before the body was placed back to the first, in ascending order. */
async function followBack(
  source: FrameSource,
  body: PlacedBody,
  firstFrame: number,
  search: WideSearch,
  exposureShare: number,
  signal: AbortSignal | undefined,
): Promise<Sighting[]> {
  const start = await source.frame(body.frame, signal);
  const follower = followerAt(body, start, search, exposureShare);
  follower.push(body.frame, start);
  const backwards: Sighting[] = [];
  for (let n = body.frame - 1; n >= firstFrame; n--)
    backwards.push(follower.push(n, await source.frame(n, signal)));
  return backwards.reverse();
}

function refuseMarksOutside(sheet: Sheet, picture: Picture): void {
  const marks = [
    ...sheet.bodies.flatMap((b) => [
      { name: `bodies: "${b.id}"`, x: b.x, y: b.y },
      ...(b.marks ?? []).map((m) => ({
        name: `bodies: the mark of "${b.id}" in frame ${m.frame}`,
        x: m.x,
        y: m.y,
      })),
    ]),
    ...sheet.scale.bars.flatMap((bar, i) => [
      { name: `scale.bars[${i}].a`, ...bar.a },
      { name: `scale.bars[${i}].b`, ...bar.b },
    ]),
    ...(sheet.scale.plumb
      ? [
          { name: 'scale.plumb.a', ...sheet.scale.plumb.a },
          { name: 'scale.plumb.b', ...sheet.scale.plumb.b },
        ]
      : []),
    ...(sheet.scale.fiducials ?? []).map((f, i) => ({ name: `scale.fiducials[${i}]`, x: f.x, y: f.y })),
  ];
  const outside = marks.filter(
    (m) => m.x < -0.5 || m.y < -0.5 || m.x > picture.widthPx - 0.5 || m.y > picture.heightPx - 0.5,
  );
  if (outside.length === 0) return;
  const named = outside.map((m) => `${m.name} at x ${m.x}, y ${m.y}`).join('; ');
  throw new Refusal(
    'markOutside',
    2,
    `Outside the picture (${picture.widthPx} × ${picture.heightPx} px): ${named}. Set the mark again.`,
  );
}
