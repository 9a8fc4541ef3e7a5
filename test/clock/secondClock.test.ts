import { describe, expect, it } from 'vitest';
import { frameTimes } from '../../analysis/clock/frameTimes.ts';
import {
  rateOfSecondClock,
  secondClockFindings,
  uIntervalUnstatedS,
} from '../../analysis/clock/secondClock.ts';

const coded = { pts: Array.from({ length: 501 }, () => null), timeBase: { num: 1, den: 1000 } };
const shown = { fromFrame: 0, toFrame: 500, intervalS: 0.5 };
const timesAt = (rateHz: number) => Float64Array.from({ length: 501 }, (_, n) => n / rateHz);

describe('a second clock in the picture', () => {
  it('gives the rate where it is the clock', () => {
    expect(rateOfSecondClock(shown)).toBe(1000);
    const times = frameTimes({ kind: 'secondClock', secondClock: shown }, coded, null, 0, 500);
    expect(times.ok && times.timeS[500]).toBeCloseTo(0.5, 12);
  });

  it('is good to half a frame at each reading where nothing is stated', () => {
    // two rectangles of half-width 0.5 ms: √2 · 0.5/√3
    expect(uIntervalUnstatedS(shown) * 1000).toBeCloseTo((Math.SQRT2 * 0.5) / Math.sqrt(3), 12);
  });

  it('agrees with times within what both are good to', () => {
    const [finding] = secondClockFindings(shown, timesAt(1000.5), 1e-4, 0.0004);
    expect(finding.code).toBe('secondClockAgrees');
  });

  it('that disagrees is a finding with both intervals and the rate it would give', () => {
    const [finding] = secondClockFindings(shown, timesAt(960), 1e-4, 0.0004);
    expect(finding).toMatchObject({ level: 'caution', code: 'secondClockDisagrees' });
    expect(finding.text).toContain('0.5 s pass on the clock in the picture, but 0.520833 s');
    expect(finding.text).toContain('1000 Hz');
    expect(finding.text).toContain('4.2 %');
  });

  it('that is beyond the footage is refused', () => {
    const beyond = { ...shown, toFrame: 501 };
    const times = frameTimes(
      { kind: 'captureRate', captureRateHz: 1000, secondClock: beyond },
      coded,
      null,
      0,
      500,
    );
    expect(times).toMatchObject({ ok: false, problem: expect.stringContaining('frame 501 is beyond') });
  });
});
