import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';

/** What the footage itself says about its frames' times. */
export interface CodedTimes {
  /** The file's own integer per frame, null where it gives none. */
  readonly pts: readonly (number | null)[];
  readonly timeBase: { readonly num: number; readonly den: number };
}

export type FrameTimes =
  | { readonly ok: true; readonly timeS: Float64Array; readonly findings: readonly Finding[] }
  | { readonly ok: false; readonly problem: string };

const remedy = 'state clock.kind "captureRate", or "timestamps" with a list of times';

/**
 * The time of every frame of the footage: mid-exposure of the first sensor row [s]; zero is frame 0 (with a list of times,
 * the list's own zero).
 *
 * @param clock       as stated
 * @param coded       the footage's own times, one entry per frame
 * @param listedS     the list of times where the clock is one, one entry per frame [s]
 * @param firstFrame  first frame that will be used
 * @param lastFrame   last frame that will be used
 * @returns one time per frame of the footage; outside first … last they may be NaN
 */
export function frameTimes(
  clock: Sheet['clock'],
  coded: CodedTimes,
  listedS: Float64Array | null,
  firstFrame: number,
  lastFrame: number,
): FrameTimes {
  const count = coded.pts.length;
  if (clock.kind === 'captureRate') {
    return {
      ok: true,
      timeS: Float64Array.from({ length: count }, (_, n) => n / clock.captureRateHz),
      findings: [],
    };
  }

  let timeS: Float64Array;
  if (clock.kind === 'timestamps') {
    if (!listedS) throw new Error('frameTimes: the clock is a list of times but no list was passed');
    if (listedS.length < lastFrame + 1) {
      return {
        ok: false,
        problem: `clock.path: the list has ${listedS.length} times, but frame ${lastFrame} is to be reduced; give one time for each frame`,
      };
    }
    timeS = listedS.slice(0, count);
  } else {
    const zero = coded.pts[0] ?? 0;
    const secondsPerTick = coded.timeBase.num / coded.timeBase.den;
    timeS = Float64Array.from(coded.pts, (pts) =>
      pts === null ? Number.NaN : (pts - zero) * secondsPerTick,
    );
  }

  const source = clock.kind === 'container' ? "the file's own times" : 'the list of times';
  for (let n = firstFrame; n <= lastFrame; n++) {
    if (!Number.isFinite(timeS[n]))
      return { ok: false, problem: `clock: ${source} lack a time for frame ${n}; ${remedy}` };
    if (n > firstFrame && timeS[n] <= timeS[n - 1]) {
      return {
        ok: false,
        problem: `clock: ${source} do not increase from frame ${n - 1} to frame ${n}; ${remedy}`,
      };
    }
  }
  return { ok: true, timeS, findings: unevenFinding(timeS, firstFrame, lastFrame, source) };
}

/** Steps that are not the usual one: dropped frames, or a rate that varies. The times are used as they are. */
function unevenFinding(
  timeS: Float64Array,
  firstFrame: number,
  lastFrame: number,
  source: string,
): Finding[] {
  const steps = Array.from(
    { length: lastFrame - firstFrame },
    (_, i) => timeS[firstFrame + i + 1] - timeS[firstFrame + i],
  );
  const usual = medianOf(steps);
  const odd = steps.filter((s) => Math.abs(s / usual - 1) > 0.5).length;
  if (odd === 0) return [];
  return [
    {
      level: 'caution',
      code: 'timesUneven',
      text: `By ${source}, ${odd} of ${steps.length} steps from frame to frame differ from the usual ${(usual * 1000).toPrecision(4)} ms by more than half: frames may be missing.`,
    },
  ];
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[sorted.length >> 1] ?? Number.NaN;
}
