import { describe, expect, it } from 'vitest';
import { peakJerk } from '../../analysis/keyValues/peakJerk.ts';
import { peaksOf } from '../../analysis/keyValues/peaks.ts';
import { peakWidth } from '../../analysis/keyValues/peakWidth.ts';
import { commonAt, madeMotion } from './madeMotion.ts';

/** A pulse a = 10 + A/(1 + ((t - m)/w)²): at half of its whole height A + 10 it is wide by a little more than w. */
const pulse = (peakMps2: number, middleS: number, wS: number) => (t: number) => ({
  dropM: 0,
  speedMps: peakMps2 * wS * (Math.atan((t - middleS) / wS) + Math.atan(middleS / wS)),
  accelerationMps2: 10 + peakMps2 / (1 + ((t - middleS) / wS) ** 2),
});

function acceleration(rateHz: number, untilS: number, wS = 0.004) {
  const motion = madeMotion(rateHz, untilS, pulse(500, 0.2, wS));
  const { keyValues, findings } = peaksOf(motion, 0, untilS + 1, commonAt(rateHz), true);
  return { value: keyValues.find((k) => k.quantity === 'tip.peakAcceleration'), findings };
}

describe('the peak of the acceleration', () => {
  it('is given with its bandwidth and the frames in its half width, which the frame rate leaves in the budget', () => {
    const { value, findings } = acceleration(4000, 0.4);
    expect(value?.value).toBeCloseTo(510, 6);
    expect(value?.bandwidthHz).toBe(1000);
    // Half of 510 is reached where 500/(1 + x²) = 245: x = 1.0202; 16 frames in 4 ms.
    expect(value?.framesInHalfWidth).toBeCloseTo(16 * 1.0202, 1);
    expect(value?.atLeast).toBeUndefined();
    // Shared limits, section F: 0.21 % at 16 frames.
    const limit = value?.budget.find((b) => b.source.startsWith('frame rate'))?.u ?? 0;
    expect(limit / 510).toBeCloseTo(0.0021, 4);
    expect(findings).toEqual([]);
  });

  it('is flagged below three frames in the half width, and its u holds what the chart says of it', () => {
    const { value, findings } = acceleration(600, 0.4);
    expect(value?.framesInHalfWidth).toBeLessThan(3);
    expect(findings.map((f) => f.code)).toEqual(['peakNarrow']);
    // Between 4.6 % at two frames and 1.7 % at three.
    expect((value?.u ?? 0) / (value?.value ?? 1)).toBeGreaterThan(0.017);
    expect(findings[0].text).toMatch(/At least 7\d0 frames per second would do/);
  });

  it('is not given below two, and the finding says which frame rate would do', () => {
    const { value, findings } = acceleration(400, 0.4);
    expect(value).toBeUndefined();
    expect(findings.map((f) => f.code)).toEqual(['peakTooNarrow']);
    expect(findings[0].text).toMatch(
      /^tip\.peakAcceleration is not given: .* is 1\.\d frames wide .* At least 7\d0 frames per second would do/,
    );
    // And it does.
    expect(acceleration(790, 0.4).value).toBeDefined();
  });

  it('is "at least" where the record ends on the way up', () => {
    const { value, findings } = acceleration(4000, 0.199);
    expect(value?.atLeast).toBe(true);
    expect(value?.definition).toMatch(/^at least: /);
    expect(findings.map((f) => f.code)).toEqual(['peakAtEnd']);
  });

  it('of a level acceleration is neither cut nor narrow', () => {
    const level = () => ({ dropM: 0, speedMps: 0, accelerationMps2: 9.8 });
    const { keyValues, findings } = peaksOf(madeMotion(1000, 0.3, level), 0, 1, commonAt(1000), false);
    expect(findings).toEqual([]);
    expect(keyValues.find((k) => k.quantity === 'tip.peakAcceleration')?.value).toBeCloseTo(9.8, 9);
  });
});

describe('peakWidth', () => {
  it('is the mean of both sides, or of the one that is seen', () => {
    const timeS = [0, 1, 2, 3, 4, 5, 6];
    expect(peakWidth(timeS, [0, 0, 2, 4, 2, 1, 0], 3)).toEqual({ halfWidthS: 1, sides: 2 });
    expect(peakWidth(timeS, [0, 1, 2, 4, 3, 2, 0], 3)).toEqual({ halfWidthS: 1.5, sides: 2 });
    expect(peakWidth(timeS.slice(0, 4), [0, 0, 2, 4], 3)).toEqual({ halfWidthS: 1, sides: 1 });
    expect(peakWidth(timeS.slice(0, 3), [3, 4, 3], 1)).toEqual({ halfWidthS: 1, sides: 0 });
  });
});

describe('the peak of the jerk', () => {
  const made = madeMotion(1000, 0.3, pulse(500, 0.2, 0.02));
  const with_ = (u: number) => ({
    ...made,
    jerkY: {
      value: Float64Array.from(made.motion.timeS, (t) => -1000 * Math.sin(20 * t)),
      u: Float64Array.from(made.motion.timeS, () => u),
    },
  });

  it('is the largest that is more than twice its uncertainty', () => {
    const jerk = peakJerk(with_(10), 0, 0.25, commonAt(1000));
    expect(jerk?.value).toBeCloseTo(1000 * Math.abs(Math.sin(20 * 0.236)), 0);
    expect(jerk?.unit).toBe('m/s3');
    expect(peakJerk(with_(600), 0, 0.25, commonAt(1000))).toBeNull();
  });

  it('is not given where the method has none', () => {
    expect(peakJerk(made, 0, 0.25, commonAt(1000))).toBeNull();
  });
});
