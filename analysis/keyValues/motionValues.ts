import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { WorldTrack } from '../motion/worldTrack.ts';
import type { Finding, KeyValue } from '../sheet/result.ts';
import type { Events } from './events.ts';
import { intervalValues } from './intervalValues.ts';
import { leadStart } from './leadStart.ts';
import type { NumbersInput } from './numbersInput.ts';
import { peakJerk } from './peakJerk.ts';
import { peaksOf } from './peaks.ts';
import { speedAtHeight } from './speedAtHeight.ts';

/** The key values that rest on velocity and acceleration: peaks, start of the lead, and what the sheet's motion section asks for. */
export function motionValues(
  { tracks, common, sheet }: NumbersInput,
  { releases, extension, fall }: Pick<Events, 'releases' | 'extension' | 'fall'>,
  motions: ReadonlyMap<string, BodyMotion>,
): { keyValues: KeyValue[]; findings: Finding[] } {
  const keyValues: KeyValue[] = [];
  const findings: Finding[] = [];
  const tip = fallen('tip');
  const ball = fallen('reference');

  if (tip) {
    const lastS = tip.track.timeS[tip.track.timeS.length - 1];
    const peaks = peaksOf(
      tip.motion,
      tip.release.timeS,
      extension?.timeS ?? lastS,
      common,
      extension !== null,
    );
    keyValues.push(...peaks.keyValues);
    findings.push(...peaks.findings);
    const jerk = peakJerk(tip.motion, tip.release.timeS, extension?.timeS ?? lastS, common);
    if (jerk) keyValues.push(jerk);
  }
  if (tip && ball && fall) {
    const untilS = Math.min(extension?.timeS ?? Number.POSITIVE_INFINITY, fall.lastS);
    const { timeS, frame } = tip.track;
    const frameOf = (atS: number) => frame[timeS.indexOf(atS)];
    const lead = leadStart(
      tip.motion,
      ball.motion,
      tip.release,
      ball.release,
      untilS,
      common.frameTimeS,
      frameOf,
    );
    if (lead) keyValues.push(lead);
  }

  const byName = { tip, ball };
  sheet.motion?.intervals?.forEach((interval, k) => {
    const body = byName[interval.body];
    if (!body) {
      findings.push({
        level: 'caution',
        code: 'intervalNotCovered',
        text: `motion.intervals[${k}]: the ${interval.body} is not seen to fall, so nothing can be given for it.`,
      });
      return;
    }
    const zeros = { release: body.release.timeS, extension: extension?.timeS ?? null, clock: 0 as const };
    const values = intervalValues(body.motion, interval, k + 1, zeros, common);
    keyValues.push(...values.keyValues);
    findings.push(...values.findings);
  });
  sheet.motion?.heightsM?.forEach((heightM, k) => {
    const passed = (['tip', 'ball'] as const).flatMap((name) => {
      const body = byName[name];
      if (!body) return [];
      return (
        speedAtHeight(name, body.motion, heightM, k + 1, body.release.timeS, body.release.yM, common) ?? []
      );
    });
    keyValues.push(...passed);
    if (passed.length === 0) {
      findings.push({
        level: 'caution',
        code: 'heightNotPassed',
        text: `motion.heightsM[${k}]: no body passes the height ${heightM} m after its release (world, y up from the origin).`,
      });
    }
  });
  return { keyValues, findings };

  function fallen(role: WorldTrack['role']) {
    const track = tracks.find((t) => t.role === role);
    const release = track && releases.get(track.bodyId);
    const motion = track && motions.get(track.bodyId);
    return track && release && motion ? { track, release, motion } : null;
  }
}
