import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { rateOfSecondClock } from './secondClock.ts';
import { coarseTimesFinding, stepFindings, usualStepS } from './stepTimes.ts';

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
 * @param exposureS   of a frame, where it is stated: it cannot be longer than the time from frame to frame [s]
 * @returns one time per frame of the footage; outside first … last they may be NaN
 */
export function frameTimes(
  clock: Sheet['clock'],
  coded: CodedTimes,
  listedS: Float64Array | null,
  firstFrame: number,
  lastFrame: number,
  exposureS = 0,
): FrameTimes {
  const count = coded.pts.length;
  const { secondClock } = clock;
  if (secondClock && secondClock.toFrame >= count) {
    return {
      ok: false,
      problem: `clock.secondClock.toFrame: frame ${secondClock.toFrame} is beyond the footage's last, ${count - 1}; give a frame that it has`,
    };
  }
  if (clock.kind === 'captureRate' || clock.kind === 'secondClock') {
    const rateHz = clock.kind === 'captureRate' ? clock.captureRateHz : rateOfSecondClock(clock.secondClock);
    const timeS = Float64Array.from({ length: count }, (_, n) => n / rateHz);
    return exposureTooLong(exposureS, 1 / rateHz) ?? { ok: true, timeS, findings: [] };
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
  const usualS = usualStepS(timeS, firstFrame, lastFrame);
  const findings = stepFindings(timeS, firstFrame, lastFrame, source);
  if (clock.kind === 'container') {
    findings.push(...coarseTimesFinding(coded.timeBase.num / coded.timeBase.den, usualS));
  }
  return exposureTooLong(exposureS, usualS) ?? { ok: true, timeS, findings };
}

function exposureTooLong(exposureS: number, usualS: number): FrameTimes | null {
  if (!(exposureS > usualS)) return null;
  return {
    ok: false,
    problem: `camera.exposureS (${exposureS} s) is longer than the time from frame to frame (${Number(usualS.toPrecision(4))} s); check it and the clock`,
  };
}
