import { settle } from '../../analysis/sheet/assumptions.ts';
import type { Finding } from '../../analysis/sheet/result.ts';
import type { Sheet, SheetBody } from '../../analysis/sheet/sheet.ts';
import { bridgeGaps } from '../../analysis/track/bridge.ts';
import { calibrateUncertainty } from '../../analysis/track/calibrateUncertainty.ts';
import { type Camera, judgeCamera, registered, shakenPlate } from '../../analysis/track/camera.ts';
import type { CameraShift } from '../../analysis/track/cameraShift.ts';
import { startCrossings } from '../../analysis/track/crossings.ts';
import { doubledFrames, withoutFrames } from '../../analysis/track/doubledFrames.ts';
import { type Follower, startFollower } from '../../analysis/track/follow.ts';
import type { Plate } from '../../analysis/track/match.ts';
import { plateOf, type RestPlace } from '../../analysis/track/plate.ts';
import { type Rest, startRest } from '../../analysis/track/rest.ts';
import { type SampledFrame, startSampling } from '../../analysis/track/sampling.ts';
import type { PlacedBody, Sighting } from '../../analysis/track/sighting.ts';
import type { Picture, Track, WideSearch } from '../../analysis/track/track.ts';
import { trackOf } from '../../analysis/track/trackOf.ts';
import type { FootageIndex, FrameSource } from '../footage/frameSource.ts';
import { Refusal } from '../refusal.ts';
import { doubledFindings, saturationFindings } from './followFindings.ts';
import { startPace } from './pace.ts';
import { noiseOrRefuse, refuseMarksOutside, refuseUnfitLens } from './placing.ts';
import type { Progress } from './progress.ts';

export interface Followed {
  readonly index: FootageIndex;
  readonly firstFrame: number;
  readonly lastFrame: number;
  readonly tracks: readonly Track[];
  readonly findings: readonly Finding[];
}

/** Standard uncertainty of a place set by hand [px] where nothing better is known. */
const uMarkPx = 0.5;

/** Frames kept for the plate: enough for a quiet median, few enough for memory (31 MB at 1280 × 800, 8 bit). */
const plateFrames = 31;

/** A body with what is gathered about it on the way. */
interface Run {
  readonly placed: PlacedBody;
  first: Picture | null;
  rest: Rest | null;
  follower: Follower | null;
  sightings: Sighting[];
}

/**
 * Follows every body of a sheet through the footage, in two passes: the first indexes the footage, gathers frames for the
 * plate and watches the bodies while they rest; the second follows them. Bodies that were placed in a later frame than the
 * first are then followed backwards.
 *
 * @throws Refusal (status 2) for marks outside the picture, a body without features, frames that do not exist
 */
export async function followBodies(
  source: FrameSource,
  sheet: Sheet,
  search: WideSearch,
  signal: AbortSignal | undefined,
  report: (progress: Progress) => void,
): Promise<Followed> {
  const { firstFrame } = sheet.footage;
  const wantedLast = sheet.footage.lastFrame ?? Number.POSITIVE_INFINITY;
  const patches = settle(sheet).patchPx;
  const runs = sheet.bodies.map(
    (body, i): Run => ({
      placed: placedBody(body, patches[i]),
      first: null,
      rest: null,
      follower: null,
      sightings: [],
    }),
  );

  const sampling = startSampling(plateFrames);
  const indexPace = startPace('index', report);
  const index = await source.index({
    signal,
    onFrame({ n, picture }, expectedCount) {
      if (n === firstFrame) {
        refuseMarksOutside(sheet, picture);
        refuseUnfitLens(sheet, picture);
      }
      if (n >= firstFrame && n <= wantedLast) {
        sampling.push(n - firstFrame, picture);
        for (const run of runs) watch(run, n, picture);
      }
      indexPace.frameDone(n + 1, expectedCount);
    },
  });
  const lastFrame = lastFrameOf(sheet, index, runs);

  const places = runs.flatMap(({ placed, first }) =>
    first ? [{ xPx: placed.xPx, yPx: placed.yPx, radiusPx: placed.patchPx, picture: first }] : [],
  );
  const camera = judgeCamera(sampling.frames, places);
  const plate = plateFor(camera, sampling.frames, places);
  const shaken =
    camera.kind === 'shaken' && plate ? { gauge: camera.gauge, plate: shakenPlate(plate) } : null;
  const shifts = new Map<number, CameraShift | null>();
  let lastShift = { xPx: 0, yPx: 0 };
  /** The plate as the camera sees it in a frame; its shift is kept. */
  const plateIn = (n: number, picture: Picture): Plate | undefined => {
    if (!shaken) return undefined;
    const shift = shaken.gauge(picture, lastShift);
    shifts.set(n, shift);
    if (shift) lastShift = shift;
    return shaken.plate.plateAt(shift ?? { ...lastShift, uPx: 0 });
  };
  const exposureShare = exposureShareOf(sheet, index);
  for (const run of runs) {
    if (!run.first || !run.rest) throw new Error(`followBodies: frame ${run.placed.frame} never came`);
    run.follower = startFollower(run.placed, {
      first: run.first,
      still: run.rest.still(),
      plate,
      search,
      exposureShare,
    });
  }

  const crossings = startCrossings();
  const trackPace = startPace('track', report);
  const frames = lastFrame - firstFrame + 1;
  for await (const { n, picture } of source.frames(firstFrame, lastFrame, signal)) {
    const plateNow = plateIn(n, picture);
    const placed = runs.flatMap((run) => (run.follower && n >= run.placed.frame ? [run.follower] : []));
    crossings.push(placed, n, picture, plateNow);
    trackPace.frameDone(n - firstFrame + 1, frames);
  }
  for (const run of runs) {
    run.sightings = run.follower?.finish() ?? [];
    if (run.placed.frame > firstFrame && run.first && run.rest) {
      const back = startFollower(run.placed, {
        first: run.first,
        still: run.rest.still(),
        plate,
        search,
        exposureShare,
      });
      for (let n = run.placed.frame; n >= firstFrame; n--) {
        const picture = await source.frame(n, signal);
        back.push(n, picture, plateIn(n, picture));
      }
      run.sightings.unshift(...back.finish().slice(1).reverse());
    }
  }
  const doubled = doubledFrames(
    runs.map((run) => run.sightings),
    index.frameHashes,
  );
  const tracks = runs.map((run) => {
    const seen = withoutFrames(run.sightings, doubled);
    return calibrateUncertainty(trackOf(run.placed.id, bridgeGaps(seen), shifts));
  });
  return {
    index,
    firstFrame,
    lastFrame,
    tracks,
    findings: [
      ...(camera.finding ? [camera.finding] : []),
      ...saturationFindings(runs),
      ...doubledFindings(doubled),
    ],
  };
}

function plateFor(
  camera: Camera,
  frames: readonly SampledFrame[],
  places: readonly RestPlace[],
): Plate | null {
  if (camera.kind === 'moving') return null;
  return plateOf(camera.kind === 'shaken' ? registered(frames, camera.shifts) : frames, places);
}

/** First pass: the frame in which the body was placed, and those after it for as long as it rests. */
function watch(run: Run, n: number, picture: Picture): void {
  const { placed } = run;
  if (n === placed.frame) {
    run.first = { ...picture, luma: picture.luma.slice() };
    run.rest = startRest(run.first, placed.xPx, placed.yPx, placed.patchPx, noiseOrRefuse(placed, picture));
  } else if (n > placed.frame) run.rest?.push(picture);
}

/** The last frame to reduce: what was asked for, as far as the footage has it. */
function lastFrameOf(sheet: Sheet, index: FootageIndex, runs: readonly Run[]): number {
  const { firstFrame, lastFrame: wantedLast } = sheet.footage;
  const last = index.frameCount - 1;
  const damaged = index.findings.some((f) => f.code === 'footageDamaged');
  if (firstFrame > last || (wantedLast !== undefined && last < wantedLast && !damaged)) {
    throw new Refusal(
      'framesMissing',
      2,
      `footage: frames ${firstFrame} to ${wantedLast ?? 'the end'} are to be reduced, but the footage has frames 0 to ${last}; correct firstFrame and lastFrame.`,
    );
  }
  const lastFrame = Math.min(wantedLast ?? last, last);
  if (lastFrame - firstFrame < 2) {
    throw new Refusal(
      'framesTooFew',
      3,
      `footage: only ${lastFrame - firstFrame + 1} frames can be read; a drop cannot be reduced from so few.`,
    );
  }
  const late = runs.find((run) => run.placed.frame > lastFrame);
  if (late) {
    throw new Refusal(
      'bodyOutsideFrames',
      2,
      `bodies: "${late.placed.id}" is placed in frame ${late.placed.frame}, but the last frame that can be read is ${lastFrame}.`,
    );
  }
  return lastFrame;
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

/** Exposure as a share of the time from frame to frame; 0 where one of them is not known. */
function exposureShareOf(sheet: Sheet, index: FootageIndex): number {
  const { clock, camera } = sheet;
  if (camera?.exposureS === undefined) return 0;
  if (clock.kind === 'captureRate') return camera.exposureS * clock.captureRateHz;
  const first = index.pts[0];
  const last = index.pts[index.frameCount - 1];
  if (clock.kind === 'timestamps' || first === null || last === null || last === first) return 0;
  return (
    (camera.exposureS * (index.frameCount - 1)) / (((last - first) * index.timeBase.num) / index.timeBase.den)
  );
}
