import { type FallingTrack, mainFall } from '../gravity/mainFall.ts';
import type { Finding } from '../sheet/result.ts';
import { commonRatesHz } from './commonRates.ts';

/** Less than this between stated and true rate is left to the gravity check: scale and drag can do as much. */
const leastOff = 0.15;
/** A common rate is proposed when it is as near as this: drag of a light ball and a careless scale take some per cent of g. */
const proposalShare = 0.04;
export interface RateMixUp {
  readonly gMps2: number;
  /** Stated rate over true rate, from the square root of g against local gravity. */
  readonly ratio: number;
  readonly trueRateHz: number;
  /** The common rate that this is; null if it is near none. */
  readonly proposedHz: number | null;
}

/**
 * Whether the body falls as it would if another rate had been taken for the capture rate: accelerations go with the square of
 * the rate, so g off by (30/1000)² = 1/1111 means that 30 was taken for 1000.
 *
 * @param track      a body that falls freely for most of its way
 * @param rateHz     the rate by the times as they are
 * @returns null when there is no fall to judge by, or it is within 15 % of the rate
 */
export function rateMixUp(track: FallingTrack, rateHz: number, localGMps2: number): RateMixUp | null {
  const gMps2 = mainFall(track)?.accelerationMps2 ?? Number.NaN;
  if (!(gMps2 > 0)) return null;
  const ratio = Math.sqrt(gMps2 / localGMps2);
  if (Math.abs(Math.log(ratio)) < Math.log(1 + leastOff)) return null;
  const trueRateHz = rateHz / ratio;
  const nearest = commonRatesHz.reduce<number>(
    (best, c) => (Math.abs(Math.log(c / trueRateHz)) < Math.abs(Math.log(best / trueRateHz)) ? c : best),
    commonRatesHz[0],
  );
  const proposedHz = Math.abs(nearest / trueRateHz - 1) < proposalShare ? nearest : null;
  return { gMps2, ratio, trueRateHz, proposedHz };
}

/** @param clockField  the field of the sheet that gives the rate */
export function rateMixUpFinding(mixUp: RateMixUp, rateHz: number, clockField: string): Finding {
  const { gMps2, ratio, trueRateHz, proposedHz } = mixUp;
  const square = ratio ** 2;
  const share =
    square < 1 ? `1/${Number((1 / square).toPrecision(4))}` : `${Number(square.toPrecision(4))} times`;
  const stated = Number(rateHz.toPrecision(5));
  const remedy =
    proposedHz === null
      ? `a capture rate of about ${Number(trueRateHz.toPrecision(3))} Hz would fit, which is no usual one: check ${clockField} and the scale.`
      : `${stated} Hz seems to have been taken for ${proposedHz} Hz (the rate at which a file plays is not the capture rate). Check ${clockField}; ${proposedHz} Hz would fit.`;
  return {
    level: 'caution',
    code: 'captureRateDoubtful',
    text: `The reference body falls with ${Number(gMps2.toPrecision(3))} m/s², ${share} of local gravity: ${remedy}`,
  };
}
