import type { BodyMotion } from './bodyMotion.ts';
import type { Break } from './breaks.ts';
import type { MotionMethod, Piece, Smoothed } from './method.ts';
import { restBefore } from './restBefore.ts';
import type { WorldTrack } from './worldTrack.ts';

/** A range of indices of a track, to exclusive. */
export interface Range {
  readonly from: number;
  readonly to: number;
}

/** Parts a record at its breaks (release, extension): no smoothing crosses a kink. */
export function piecesOf(timeS: Float64Array, breaksS: readonly number[]): Range[] {
  const edges = [...breaksS].sort((a, b) => a - b).map((b) => timeS.findIndex((t) => t >= b));
  const starts = [0, ...edges.filter((e) => e > 0), timeS.length];
  return starts.slice(1).flatMap((to, i) => (to > starts[i] ? [{ from: starts[i], to }] : []));
}

/**
 * Position, velocity and acceleration of a body against time, each with its standard uncertainty. The record is parted at its
 * breaks; before release the body rests, and the piece after it starts from rest there.
 *
 * Only what varies from frame to frame is in these uncertainties; scale and clock are common to all points and are in the
 * budgets of the key values.
 */
export function motionOf(
  track: WorldTrack,
  breaks: readonly Break[],
  frameTimeS: number,
  method: MotionMethod,
): BodyMotion {
  const n = track.timeS.length;
  const blank = () => new Float64Array(n).fill(Number.NaN);
  const series = { x: blank(), vx: blank(), ax: blank(), y: blank(), vy: blank(), ay: blank() };
  const u = { x: blank(), vx: blank(), ax: blank(), y: blank(), vy: blank(), ay: blank() };
  const bandwidthHz = blank();
  const jerkY = { value: blank(), u: blank() };
  const settings: { fromS: number; toS: number; x: unknown; y: unknown }[] = [];
  const release = breaks.find((b) => b.kind === 'release');

  for (const range of piecesOf(
    track.timeS,
    breaks.map((b) => b.timeS),
  )) {
    const down = method.smooth(pieceOf(track.timeS, track.yM, track.uYM, range, release));
    const across = method.smooth(pieceOf(track.timeS, track.xM, track.uXM, range, release));
    take(range, down, [series.y, series.vy, series.ay], [u.y, u.vy, u.ay]);
    take(range, across, [series.x, series.vx, series.ax], [u.x, u.vx, u.ax]);
    // What no frame rate can show is not within the bandwidth.
    bandwidthHz.set(
      down.bandwidthHz.map((hz) => Math.min(hz, 0.5 / frameTimeS)),
      range.from,
    );
    if (down.jerk) {
      jerkY.value.set(down.jerk.value, range.from);
      jerkY.u.set(down.jerk.u, range.from);
    }
    settings.push({
      fromS: track.timeS[range.from],
      toS: track.timeS[range.to - 1],
      x: across.settings,
      y: down.settings,
    });
  }

  const known = Array.from(track.timeS.keys()).filter(
    (i) => Number.isFinite(series.ay[i]) && Number.isFinite(series.ax[i]),
  );
  const pick = (values: Float64Array) => known.map((i) => values[i]);
  return {
    motion: {
      timeS: pick(track.timeS),
      xM: pick(series.x),
      yM: pick(series.y),
      vxMps: pick(series.vx),
      vyMps: pick(series.vy),
      axMps2: pick(series.ax),
      ayMps2: pick(series.ay),
      uXM: pick(u.x),
      uYM: pick(u.y),
      uVxMps: pick(u.vx),
      uVyMps: pick(u.vy),
      uAxMps2: pick(u.ax),
      uAyMps2: pick(u.ay),
      measuredXM: pick(track.xM),
      measuredYM: pick(track.yM),
      method: method.name,
      settings: {
        /** Of the acceleration along the plumb line. */
        bandwidthHz: pick(bandwidthHz),
        breaksS: breaks.map((b) => b.timeS),
        pieces: settings,
      },
    },
    bandwidthHz: Float64Array.from(pick(bandwidthHz)),
    jerkY: { value: Float64Array.from(pick(jerkY.value)), u: Float64Array.from(pick(jerkY.u)) },
  };
}

function pieceOf(
  timeS: Float64Array,
  valueM: Float64Array,
  uM: Float64Array,
  { from, to }: Range,
  release: Break | undefined,
): Piece {
  const atRest = release !== undefined && timeS[to - 1] < release.timeS;
  const startsThere = release !== undefined && from > 0 && timeS[from - 1] < release.timeS && !atRest;
  return {
    timeS: timeS.slice(from, to),
    valueM: valueM.slice(from, to),
    uM: uM.slice(from, to),
    restUntil: startsThere
      ? restBefore(valueM.subarray(0, from), uM.subarray(0, from), release.timeS, release.uTimeS)
      : null,
    ...(atRest ? { atRest } : {}),
  };
}

function take(
  range: Range,
  { position, velocity, acceleration }: Smoothed,
  values: readonly [Float64Array, Float64Array, Float64Array],
  us: readonly [Float64Array, Float64Array, Float64Array],
): void {
  [position, velocity, acceleration].forEach((curve, q) => {
    values[q].set(curve.value, range.from);
    us[q].set(curve.u, range.from);
  });
}
