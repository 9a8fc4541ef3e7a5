import type { FallingTrack } from '../gravity/mainFall.ts';
import type { Finding } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { stepFaultFindings, stepFaults } from './movingSteps.ts';
import { rateMixUp, rateMixUpFinding } from './rateMixUp.ts';
import { secondClockFindings } from './secondClock.ts';

export interface ClockEvidence {
  readonly clock: Sheet['clock'];
  /** Mid-exposure time of row 0 of every frame of the footage [s]. */
  readonly timeS: Float64Array;
  readonly frameTimeS: number;
  /** Relative standard uncertainty of intervals by these times. */
  readonly uTimeRel: number;
  /** Standard uncertainty of the interval on the clock in the picture [s]. */
  readonly uSecondClockS: number;
  /** Track of the reference body; undefined where there is none. */
  readonly reference: FallingTrack | undefined;
  readonly localGMps2: number;
}

/** What the picture says of the clock: a second clock in it, and the fall of the reference body. */
export function clockFindings(evidence: ClockEvidence): Finding[] {
  const { clock, timeS, frameTimeS, uTimeRel, uSecondClockS, reference, localGMps2 } = evidence;
  const findings: Finding[] = [];
  if (clock.secondClock && clock.kind !== 'secondClock') {
    findings.push(...secondClockFindings(clock.secondClock, timeS, uTimeRel, uSecondClockS));
  }
  if (!reference || !(frameTimeS > 0)) return findings;
  const mixUp = rateMixUp(reference, 1 / frameTimeS, localGMps2);
  if (mixUp) findings.push(rateMixUpFinding(mixUp, 1 / frameTimeS, fieldOf[clock.kind]));
  findings.push(...stepFaultFindings(stepFaults(reference)));
  return findings;
}

const fieldOf: Readonly<Record<Sheet['clock']['kind'], string>> = {
  captureRate: 'clock.captureRateHz',
  container: 'clock.kind "container" (state the capture rate instead)',
  timestamps: 'the list of times (clock.path)',
  secondClock: 'clock.secondClock',
};
