import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';

/** A clock that is seen in the picture: what passed on it between two frames. */
export type SecondClock = NonNullable<Sheet['clock']['secondClock']>;

/** Mean frame rate between the two frames that show the second clock [Hz]. */
export function rateOfSecondClock({ fromFrame, toFrame, intervalS }: SecondClock): number {
  return (toFrame - fromFrame) / intervalS;
}

/**
 * Standard uncertainty of an interval read off a clock in the picture where none is stated: each reading is good to half a frame
 * to either side, two rectangles (JCGM 100:2008, 4.3.7).
 */
export function uIntervalUnstatedS({ fromFrame, toFrame, intervalS }: SecondClock): number {
  return (intervalS / (toFrame - fromFrame)) * Math.sqrt(2 / 12);
}

/**
 * The second clock against the times that are used: they must agree within what both are good to.
 *
 * @param timeS        time of every frame of the footage [s]
 * @param uRel         relative standard uncertainty of intervals by these times
 * @param uIntervalS   of the interval by the second clock [s]
 * @returns nothing where a time of the two frames is not known
 */
export function secondClockFindings(
  clock: SecondClock,
  timeS: Float64Array,
  uRel: number,
  uIntervalS: number,
): Finding[] {
  const byTimes = timeS[clock.toFrame] - timeS[clock.fromFrame];
  if (!Number.isFinite(byTimes)) return [];
  const u = Math.hypot(uIntervalS, uRel * byTimes);
  const off = byTimes - clock.intervalS;
  const rel = off / clock.intervalS;
  const frames = `From frame ${clock.fromFrame} to frame ${clock.toFrame}`;
  if (Math.abs(off) <= 2 * u) {
    return [
      {
        level: 'note',
        code: 'secondClockAgrees',
        text: `${frames} the clock in the picture and the times of the frames agree (${(Math.abs(off) / u).toFixed(1)} times their standard uncertainty, which is ${percent(u / clock.intervalS)} of the interval).`,
      },
    ];
  }
  const rateHz = rateOfSecondClock(clock);
  return [
    {
      level: 'caution',
      code: 'secondClockDisagrees',
      text: `${frames} ${Number(clock.intervalS.toPrecision(6))} s pass on the clock in the picture, but ${Number(byTimes.toPrecision(6))} s by the times of the frames: ${percent(Math.abs(rel))} apart, ${(Math.abs(off) / u).toFixed(1)} times their standard uncertainty. Check the clock; by the one in the picture the rate is ${Number(rateHz.toPrecision(5))} Hz (clock.kind "secondClock" uses it).`,
    },
  ];
}

function percent(share: number): string {
  return `${Number((100 * share).toPrecision(2))} %`;
}
