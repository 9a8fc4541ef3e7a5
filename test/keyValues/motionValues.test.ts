import { describe, expect, it } from 'vitest';
import { numbers } from '../../analysis/keyValues/numbers.ts';
import { speedAtHeight } from '../../analysis/keyValues/speedAtHeight.ts';
import { type MotionSettings, motionSettingsSchema } from '../../analysis/sheet/motionSettings.ts';
import { unitOfQuantity } from '../../analysis/verdict/quantities.ts';
import { steelBall } from './coverageOf.ts';
import { shareFallen } from './foldedTetherTruth.ts';
import { commonAt, madeMotion } from './madeMotion.ts';
import { framesOf, gMps2, syntheticRecord, withTracks } from './syntheticRecord.ts';

const captureRateHz = 1000;
const { input, truth } = syntheticRecord({ captureRateHz, noiseM: 20e-6, seed: 4, sphere: steelBall });
const releaseS = truth['tip.releaseTime'];
const lengthM = 0.9;
const unitS = Math.sqrt(lengthM / gMps2);

function asked(motion: object) {
  const settings: MotionSettings = motionSettingsSchema.parse({ method: 'adaptive', ...motion });
  const { keyValues, findings } = numbers({ ...input, sheet: { ...input.sheet, motion: settings } });
  return {
    keyValues,
    findings,
    value: (quantity: string) => keyValues.find((k) => k.quantity === quantity),
  };
}

describe('the motion section of a sheet', () => {
  const { value, findings, keyValues } = asked({
    intervals: [
      { body: 'ball', fromS: 0.05, toS: 0.2 },
      { fromS: 0.05, toS: 0.2 },
      { zero: 'extension', fromS: -0.1, toS: -0.02 },
      { zero: 'clock', fromS: 5, toS: 6 },
    ],
    heightsM: [-0.2, 3],
  });

  it('gets mean and largest acceleration of the ball over an interval: g less drag and buoyancy', () => {
    const mean = value('ball.meanAcceleration.1');
    // Drag takes at most 0.1 % of g in the first 0.2 s of a steel ball's fall, buoyancy 0.02 %.
    expect(mean?.value).toBeLessThan(gMps2 + 2 * (mean?.u ?? 0));
    expect(mean?.value).toBeGreaterThan(0.9985 * gMps2 - 2 * (mean?.u ?? 0));
    expect(mean?.u).toBeLessThan(0.01 * gMps2);
    expect(value('ball.maxAcceleration.1')?.bandwidthHz).toBeGreaterThan(0);
  });

  it("gets the tip's mean acceleration, as the folded tether in energy form has it", () => {
    // v² = g L s (2 - s)/(1 - s): speeds from the closed form (Calkin & March 1989) at both ends.
    const speed = (afterS: number) => {
      const s = shareFallen(afterS / unitS);
      return Math.sqrt((gMps2 * lengthM * s * (2 - s)) / (1 - s));
    };
    const mean = value('tip.meanAcceleration.2');
    const true_ = (speed(0.2) - speed(0.05)) / 0.15;
    expect(Math.abs((mean?.value ?? Number.NaN) - true_)).toBeLessThan(3 * (mean?.u ?? 0));
    expect(mean?.u).toBeLessThan(0.01 * true_);
    expect(value('tip.maxAcceleration.3')?.value).toBeGreaterThan(2 * gMps2);
  });

  it('says which interval the record does not hold, and which height no body passes', () => {
    expect(findings.find((f) => f.code === 'intervalNotCovered')?.text).toMatch(
      /^motion\.intervals\[3\] \(5 to 6 s from zero of the clock\): body tip is followed from /,
    );
    expect(findings.find((f) => f.code === 'heightNotPassed')?.text).toMatch(/^motion\.heightsM\[1\]: /);
  });

  it('gets the speed of both bodies at a height', () => {
    const tip = value('tip.speedAtHeight.1');
    const s = 0.2 / lengthM;
    const tipTruth = Math.sqrt((gMps2 * lengthM * s * (2 - s)) / (1 - s));
    expect(Math.abs((tip?.value ?? Number.NaN) - tipTruth)).toBeLessThan(3 * (tip?.u ?? 0));
    expect(tip?.u).toBeLessThan(0.01);
    // √(2 g h) less what drag and buoyancy take: at most 0.1 %.
    const ball = value('ball.speedAtHeight.1');
    const free = Math.sqrt(2 * gMps2 * 0.2);
    expect(ball?.value).toBeLessThan(free + 3 * (ball?.u ?? 0));
    expect(ball?.value).toBeGreaterThan(0.999 * free - 3 * (ball?.u ?? 0));
  });

  it('has each value with its unit in the list on which limits are checked', () => {
    for (const k of keyValues) expect(unitOfQuantity(k.quantity), k.quantity).toBe(k.unit);
    expect(unitOfQuantity('tip.meanAcceleration')).toBeNull();
    expect(unitOfQuantity('tip.meanAcceleration.0')).toBeNull();
  });

  it('gets the factor of a band for the whole curve when it asks for it, and not otherwise', () => {
    const factorOf = (simultaneousBands: boolean) => {
      const settings = motionSettingsSchema.parse({ method: 'quinticSpline', simultaneousBands });
      const { motion } = numbers({ ...input, sheet: { ...input.sheet, motion: settings } });
      return motion.tip.settings.simultaneousFactor95;
    };
    expect(factorOf(true)).toBeGreaterThan(2.4);
    expect(factorOf(false)).toBeUndefined();
  });

  it('has its method used', () => {
    const settings = motionSettingsSchema.parse({ method: 'localPolynomial', degree: 4, windowFrames: 15 });
    const { motion } = numbers({ ...input, sheet: { ...input.sheet, motion: settings } });
    expect(motion.tip.method).toBe('local polynomial, degree 4, window 15 frames');
    expect(JSON.stringify(motion.tip.settings)).toContain('"windowFrames":15');
  });
});

describe('a method that the footage cannot carry', () => {
  const settings = (motion: object) => motionSettingsSchema.parse(motion);
  it('for its frame rate is refused with the rate that would do', () => {
    const result = numbers({
      ...input,
      sheet: { ...input.sheet, motion: settings({ method: 'channelClass', class: 180 }) },
    });
    expect(result).toMatchObject({ motion: {}, keyValues: [], theory: [] });
    expect(result.findings).toHaveLength(1);
    expect(result.findings[0]).toMatchObject({ level: 'stop', code: 'methodUnfit' });
    expect(result.findings[0].text).toContain(
      'needs at least 1800 frames per second, and the footage has 1000',
    );
  });

  it('for a gap is refused with the frame that is missing', () => {
    const gap = withTracks(input, (t) => framesOf(t, (at) => Math.abs(at - 0.1) > 1e-4));
    const result = numbers({
      ...gap,
      sheet: { ...gap.sheet, motion: settings({ method: 'butterworth', cutoffHz: 40 }) },
    });
    expect(result.findings.map((f) => f.text)).toEqual([
      'motion.method "butterworth" needs frames at even times without gaps, and body tip is not measured in frame 100; prescribe localPolynomial, quinticSpline, centralDifference or adaptive, or set the body by hand there.',
    ]);
  });
});

describe('tip.leadTime', () => {
  it('is where the lead passes twice its uncertainty, and names the frame', () => {
    const lead = asked({}).value('tip.leadTime');
    // Energy form: the lead grows as g² τ⁴ / (24 · 2 L) at first, some 30 µm (noise 20 µm, smoothed) after 0.05 to 0.1 s.
    expect(lead?.value).toBeGreaterThan(0.02);
    expect(lead?.value).toBeLessThan(0.15);
    const frame = Number(/\((\d+)\)/.exec(lead?.definition ?? '')?.[1]);
    expect(Math.abs(frame / captureRateHz - releaseS - (lead?.value ?? 0))).toBeLessThan(1e-3);
  });

  it('is not given when both fall alike', () => {
    const ball = input.tracks.find((t) => t.role === 'reference');
    const alike = withTracks(input, (t) =>
      t.role === 'tip' && ball ? { ...ball, bodyId: t.bodyId, role: t.role } : t,
    );
    expect(numbers(alike).keyValues.map((k) => k.quantity)).not.toContain('tip.leadTime');
  });
});

describe('speedAtHeight', () => {
  const g = 10;
  const fall = (t: number) => ({ dropM: (g * t * t) / 2, speedMps: g * t, accelerationMps2: g });

  it('is √(2 g h) in free fall, with the height and the scale in its budget', () => {
    const body = madeMotion(500, 0.5, fall);
    const k = speedAtHeight('ball', body, -0.45, 1, 0, 0, commonAt(500));
    expect(k?.value).toBeCloseTo(3, 9);
    const part = (source: string) => k?.budget.find((b) => b.source === source)?.u;
    // dv/dh = g/v: 10/3 per second, times 0.01 mm, and 0.1 % of 0.45 m.
    expect(part('place of the body')).toBeCloseTo((10 / 3) * 1e-5, 9);
    expect(part('height by the scale')).toBeCloseTo((10 / 3) * 4.5e-4, 9);
    expect(part('scale bar length')).toBeCloseTo(3e-3, 9);
  });

  it('is nothing where the body does not get', () => {
    expect(speedAtHeight('ball', madeMotion(500, 0.5, fall), -2, 1, 0, 0, commonAt(500))).toBeNull();
  });
});
