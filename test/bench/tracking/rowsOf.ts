import type { Track, WideSearch } from '../../../analysis/track/track.ts';
import { followBodies } from '../../../main/jobs/followBodies.ts';
import { memoryFootage } from './memoryFootage.ts';
import { refinementMs } from './refinementMs.ts';
import type { FilmedBody, GoalName, Subject } from './subject.ts';

/** How well one body of a film was followed, over the frames from its release to extension. Lengths in px. */
export interface Row {
  readonly name: string;
  readonly body: string;
  readonly goal: GoalName | null;
  readonly frames: number;
  /** Of the error with its mean taken off. */
  readonly rmsX: number;
  readonly rmsY: number;
  /** Mean error, less the error with which the body was placed by hand. */
  readonly offsetX: number;
  readonly offsetY: number;
  /** Of the distance from the truth, the mean error taken off. */
  readonly distance95: number;
  readonly distanceMax: number;
  readonly boundX: number;
  readonly boundY: number;
  readonly multipleX: number;
  readonly multipleY: number;
  /** Frames before extension, rest included, in which the body was not measured. */
  readonly lost: number;
  readonly bridged: number;
  /** Share of the frames and axes in which ± 1.96 u holds the truth, the mean error taken off. */
  readonly coverage: number;
  /** Whole tracking of a frame and body: both passes, plate, prediction, search, match. */
  readonly trackingMs: number;
  /** Gauss-Newton alone from 0.1 px off, median. */
  readonly refiningMs: number;
  readonly patchPx: number;
}

export async function rowsOf(subject: Subject, search: WideSearch): Promise<Row[]> {
  const { name, pictures, sheet, bodies } = subject;
  const source = memoryFootage(pictures);
  const start = performance.now();
  const { tracks } = await followBodies(source, sheet, search, undefined, () => {});
  const trackingMs = (performance.now() - start) / pictures.length / bodies.length;
  return bodies.map((body) => {
    const track = tracks.find((t) => t.bodyId === body.id);
    const placed = sheet.bodies.find((b) => b.id === body.id);
    if (!track || !placed) throw new Error(`${name}: no track of ${body.id}`);
    const patchPx = placed.patchPx ?? Number.NaN;
    return {
      name,
      body: body.id,
      goal: body.goal,
      ...judged(track, body, subject, placed),
      trackingMs,
      refiningMs: refinementMs(subject, body, placed),
      patchPx,
    };
  });
}

function judged(
  track: Track,
  body: FilmedBody,
  { movesFrom, extendsAt }: Subject,
  placed: { readonly x: number; readonly y: number },
) {
  const states = track.state.filter((_, i) => track.frame[i] <= extendsAt);
  const seen = Array.from(track.frame.keys()).filter(
    (i) => track.state[i] === 'measured' && track.frame[i] >= movesFrom && track.frame[i] <= extendsAt,
  );
  const x = axisErrors(seen, track.frame, track.xPx, track.uXPx, body.xPx);
  const y = axisErrors(seen, track.frame, track.yPx, track.uYPx, body.yPx);
  const distances = x.errors.map((e, i) => Math.hypot(e, y.errors[i])).sort((a, b) => a - b);
  const boundX = Math.sqrt(body.bound.x);
  const boundY = Math.sqrt(body.bound.y);
  return {
    frames: seen.length,
    rmsX: x.rms,
    rmsY: y.rms,
    offsetX: x.mean - (placed.x - body.xPx[0]),
    offsetY: y.mean - (placed.y - body.yPx[0]),
    distance95: distances[Math.floor(0.95 * (distances.length - 1))] ?? Number.NaN,
    distanceMax: distances[distances.length - 1] ?? Number.NaN,
    boundX,
    boundY,
    multipleX: x.rms / boundX,
    multipleY: y.rms / boundY,
    lost: states.filter((s) => s === 'lost').length,
    bridged: states.filter((s) => s === 'bridged').length,
    coverage: (x.held + y.held) / (2 * seen.length),
  };
}

function axisErrors(
  seen: readonly number[],
  frame: Int32Array,
  found: Float64Array,
  u: Float64Array,
  truth: readonly number[] | Float64Array,
) {
  const raw = seen.map((i) => found[i] - truth[frame[i]]);
  const mean = raw.reduce((s, e) => s + e, 0) / raw.length;
  const errors = raw.map((e) => e - mean);
  return {
    mean,
    errors,
    rms: Math.sqrt(errors.reduce((s, e) => s + e * e, 0) / errors.length),
    held: errors.filter((e, k) => Math.abs(e) <= 1.96 * u[seen[k]]).length,
  };
}
