import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { clockFindings } from '../../analysis/clock/clockFindings.ts';
import { stepFaultFindings, stepFaults } from '../../analysis/clock/movingSteps.ts';
import { rateMixUp, rateMixUpFinding } from '../../analysis/clock/rateMixUp.ts';
import { seededRandom } from '../../fixtures/random.ts';

const g = 9.81;

/**
 * A ball that falls from rest at 0.05 s and lands after 0.8 m, filmed at instants that the clock may not know of.
 *
 * @param instantOf  true instant of a frame, in frames
 */
function fall(
  rateHz: number,
  noiseM: number,
  seed: number,
  instantOf: (n: number) => number = (n) => n,
  lands: 'bounces' | 'stops' = 'bounces',
) {
  const random = seededRandom(seed);
  const count = Math.round(0.6 * rateHz);
  const height = (t: number): number => {
    const tau = Math.max(0, t - 0.05);
    const landing = Math.sqrt((2 * 0.8) / g);
    if (tau < landing) return (-g * tau * tau) / 2;
    if (lands === 'stops') return -0.8;
    const up = tau - landing;
    return -0.8 + 0.6 * g * landing * up - (g * up * up) / 2;
  };
  return {
    frame: Int32Array.from({ length: count }, (_, n) => n),
    timeS: Float64Array.from({ length: count }, (_, n) => n / rateHz),
    yM: Float64Array.from(
      { length: count },
      (_, n) => height(instantOf(n) / rateHz) + noiseM * random.gaussian(),
    ),
    uYM: new Float64Array(count).fill(noiseM),
  };
}

describe('stepFaults', () => {
  it.each([240, 500, 1000, 2000])('finds nothing wrong with a fall and its landing at %i Hz', (rateHz) => {
    for (let seed = 0; seed < 40; seed++) {
      const lands = seed % 2 === 0 ? 'bounces' : 'stops';
      expect(stepFaults(fall(rateHz, 25e-6, seed, undefined, lands))).toEqual([]);
    }
  });

  it.each([1, 2, 5])('names the place where %i frames were dropped', (dropped) => {
    const at = 250;
    const track = fall(1000, 25e-6, 1, (n) => (n < at ? n : n + dropped));
    const [fault, ...others] = stepFaults(track);
    expect(others).toEqual([]);
    expect(fault).toMatchObject({ frame: at, kind: 'missing' });
    expect(Math.round(fault.steps)).toBe(1 + dropped);
    const [finding] = stepFaultFindings([fault]);
    expect(finding).toMatchObject({ level: 'caution', code: 'stepsMissing' });
    expect(finding.text).toContain('frames 249 to 250');
  });

  it('finds any single dropped frame wherever the ball moves by more than 20 times its noise', () => {
    fc.assert(
      fc.property(fc.integer({ min: 130, max: 430 }), fc.integer({ min: 0, max: 1000 }), (at, seed) => {
        // at frame 130 of 1000 Hz the ball moves 0.8 mm in a frame, its noise is 25 µm
        const found = stepFaults(fall(1000, 25e-6, seed, (n) => (n < at ? n : n + 1)));
        expect(found.map((f) => [f.frame, f.kind])).toEqual([[at, 'missing']]);
      }),
      { numRuns: 100 },
    );
  });

  it('tells a frame that was copied and replaced the next (stands still, then twice as far)', () => {
    const found = stepFaults(fall(1000, 25e-6, 3, (n) => (n === 300 ? 299 : n)));
    expect(found.map((f) => [f.frame, f.kind])).toEqual([
      [300, 'doubled'],
      [301, 'missing'],
    ]);
  });

  it('tells a step that is longer by half from a dropped frame', () => {
    const found = stepFaults(fall(1000, 25e-6, 4, (n) => (n < 300 ? n : n + 0.5)));
    expect(found).toMatchObject([{ frame: 300, kind: 'uneven' }]);
  });

  it('passes over frames that are left out', () => {
    const whole = fall(1000, 25e-6, 5);
    const keep = (_: number, i: number) => i < 200 || i > 203;
    expect(
      stepFaults({
        frame: whole.frame.filter(keep),
        timeS: whole.timeS.filter(keep),
        yM: whole.yM.filter(keep),
        uYM: whole.uYM.filter(keep),
      }),
    ).toEqual([]);
  });
});

describe('rateMixUp', () => {
  it('catches 30 taken for 1000: g/1111, and proposes 1000', () => {
    const track = fall(1000, 25e-6, 6);
    const asPlayed = { ...track, timeS: track.timeS.map((t) => (t * 1000) / 30) };
    const found = rateMixUp(asPlayed, 30, g);
    expect(found?.proposedHz).toBe(1000);
    expect((g / (found?.gMps2 ?? Number.NaN) / 1111).toFixed(2)).toBe('1.00');
    const text = found ? rateMixUpFinding(found, 30, 'clock.captureRateHz').text : '';
    expect(text).toMatch(/1\/11\d\d of local gravity: 30 Hz seems to have been taken for 1000 Hz/);
    expect(text).toContain('clock.captureRateHz');
  });

  it.each([
    [240, 1000],
    [1000, 240],
    [25, 500],
    [120, 240],
    [2000, 1000],
  ])('catches %i taken for %i', (statedHz, trueHz) => {
    const track = fall(trueHz, 25e-6, 7);
    const found = rateMixUp(
      { ...track, timeS: track.timeS.map((t) => (t * trueHz) / statedHz) },
      statedHz,
      g,
    );
    expect(found?.proposedHz).toBe(trueHz);
  });

  it('proposes nothing where no usual rate fits, and says what would', () => {
    const track = fall(1000, 25e-6, 8);
    const found = rateMixUp({ ...track, timeS: track.timeS.map((t) => t * 1.5) }, 1000 / 1.5 / 0.447, g);
    expect(found?.proposedHz).toBe(null);
    expect(found ? rateMixUpFinding(found, 1491, 'clock.captureRateHz').text : '').toContain('2240 Hz');
  });

  it('says nothing of a fall within 15 % of the rate, nor of a body that hardly moves', () => {
    const track = fall(1000, 25e-6, 9);
    expect(rateMixUp(track, 1000, g)).toBeNull();
    expect(rateMixUp({ ...track, timeS: track.timeS.map((t) => t * 1.1) }, 909, g)).toBeNull();
    expect(rateMixUp({ ...track, yM: track.yM.map(() => 0) }, 1000, g)).toBeNull();
  });
});

describe('clockFindings', () => {
  it('brings together second clock, rate and steps', () => {
    const track = fall(1000, 25e-6, 10, (n) => (n < 300 ? n : n + 1));
    const codes = clockFindings({
      clock: {
        kind: 'captureRate',
        captureRateHz: 30,
        secondClock: { fromFrame: 0, toFrame: 500, intervalS: 0.5 },
      },
      timeS: track.timeS.map((t) => (t * 1000) / 30),
      frameTimeS: 1 / 30,
      uTimeRel: 1e-4,
      uSecondClockS: 0.001,
      reference: { ...track, timeS: track.timeS.map((t) => (t * 1000) / 30) },
      localGMps2: g,
    }).map((f) => f.code);
    expect(codes).toEqual(['secondClockDisagrees', 'captureRateDoubtful', 'stepsMissing']);
  });
});
