import { describe, expect, it } from 'vitest';
import { areEven, unevenAt } from '../../../analysis/motion/prescribed/evenTimes.ts';
import { localPolynomial } from '../../../analysis/motion/prescribed/localPolynomial.ts';
import { prescribedMethods } from '../../../analysis/motion/prescribed/prescribed.ts';
import { smoothedBy } from '../../../analysis/motion/prescribed/smoothedBy.ts';
import type { MotionSettings } from '../../../analysis/sheet/motionSettings.ts';
import { seededRandom } from '../../../fixtures/random.ts';
import { pieceOf, truthPilot } from './truthPilot.ts';

function problemAt(settings: MotionSettings, rateHz: number): string | null {
  const method = prescribedMethods.flatMap((m) => m.with(settings) ?? [])[0];
  return method.rateProblem(rateHz);
}

describe('the frame rate that a method needs', () => {
  const standard = 'SAE J211-1';
  it.each([
    [60, 599, 600],
    [180, 1799, 1800],
    [600, 5999, 6000],
    [1000, 9999, 10000],
  ] as const)('is ten times class %d: not %d but %d', (cfc, tooLow, enough) => {
    const settings: MotionSettings = { method: 'channelClass', class: cfc, standard };
    expect(problemAt(settings, enough)).toBeNull();
    // A rate that is known to some parts in a million does not miss the rule by its rounding.
    expect(problemAt(settings, enough * (1 - 1e-5))).toBeNull();
    expect(problemAt(settings, tooLow)).toContain(
      `class ${cfc} of SAE J211-1 needs at least ${enough} frames per second, and the footage has ${tooLow}`,
    );
  });

  it('names the class that would do, if there is one', () => {
    expect(problemAt({ method: 'channelClass', class: 600, standard }, 2000)).toMatch(
      /; class 180 would do$/,
    );
    expect(problemAt({ method: 'channelClass', class: 600, standard }, 240)).toMatch(/the footage has 240$/);
  });

  it('is above twice a stated cut-off', () => {
    expect(problemAt({ method: 'butterworth', cutoffHz: 100 }, 200)).toBe(
      'a cut-off of 100 Hz needs at least 223 frames per second, and the footage has 200',
    );
    expect(problemAt({ method: 'butterworth', cutoffHz: 100 }, 223)).toBeNull();
  });
});

describe('even times', () => {
  const even = Float64Array.from({ length: 50 }, (_, i) => i * 0.001);
  it("are those of a camera, a container's rounding included, and not those with a gap", () => {
    expect(areEven(even)).toBe(true);
    // 30000/1001 frames per second in ticks of 1/90 000 s
    expect(areEven(even.map((_, i) => Math.round((i * 1001 * 90000) / 30000) / 90000))).toBe(true);
    expect(unevenAt(even.filter((_, i) => i !== 20))).toBe(19);
    expect(areEven(even.map((t, i) => t + (i % 2) * 1e-5))).toBe(false);
  });
});

describe('a local polynomial on uneven times', () => {
  const settings = { method: 'localPolynomial', degree: 4, windowFrames: 15 } as const;
  const cubic = (t: number) => 1 + 2 * t - 5 * t * t + 40 * t ** 3;

  it('takes the points as they are', () => {
    const piece = pieceOf(80, 0.001, cubic, 1e-5);
    const timeS = piece.timeS.map((t, i) => t + 0.0003 * Math.sin(3 * i));
    const uneven = { ...piece, timeS, valueM: timeS.map(cubic) };
    const truth = truthPilot(uneven, cubic, Number, Number);
    const smoother = localPolynomial.with(settings)?.smoother(uneven, truth);
    const a = smoother?.apply(uneven.valueM).acceleration ?? new Float64Array();
    expect(a).toHaveLength(80);
    timeS.forEach((t, i) => {
      expect(a[i]).toBeCloseTo(-10 + 240 * t, 4);
    });
  });
});

describe('beside a sharp peak', () => {
  // A pulse in the acceleration, a = A exp(-(t - m)²/(2 s²)) with s = 4 ms, through a fixed window of 25 ms: it is cut down by more
  // than any noise. Velocity and position by Simpson's rule in steps far below s.
  const [peakMps2, middleS, sS] = [500, 0.1, 0.004];
  const a = (t: number) => peakMps2 * Math.exp(-(((t - middleS) / sS) ** 2) / 2);
  const positions = integratedTwice(a, 201, 0.001);
  const y = (t: number) => positions[Math.round(t * 1000)];

  it('fixed windows without a term for bias miss the truth, with it their intervals hold', () => {
    const held = { plain: 0, whole: 0, count: 0 };
    for (let seed = 1; seed <= 20; seed++) {
      const random = seededRandom(seed);
      const piece = pieceOf(201, 0.001, y, 20e-6, () => random.gaussian());
      const pilot = truthPilot(piece, y, () => 0, a);
      const smoother = localPolynomial
        .with({ method: 'localPolynomial', degree: 4, windowFrames: 25 })
        ?.smoother(piece, pilot);
      if (!smoother) throw new Error('no smoother');
      const { acceleration } = smoothedBy(piece, smoother, pilot);
      for (let i = 96; i <= 104; i++) {
        const error = Math.abs(acceleration.value[i] - a(piece.timeS[i]));
        held.count++;
        if (error <= 1.96 * smoother.uNoise.acceleration[i]) held.plain++;
        if (error <= 1.96 * acceleration.u[i]) held.whole++;
      }
    }
    // Shared limits, section B: 25 % without the term.
    expect(held.plain / held.count).toBeLessThan(0.5);
    expect(held.whole / held.count).toBeGreaterThan(0.95);
  });
});

function integratedTwice(a: (t: number) => number, n: number, stepS: number): Float64Array {
  const fine = 50;
  const h = stepS / fine;
  const out = new Float64Array(n);
  let [position, velocity] = [0, 0];
  for (let i = 0; i + 1 < n; i++) {
    for (let k = 0; k < fine; k++) {
      const t = i * stepS + k * h;
      const [a0, a1, a2] = [a(t), a(t + h / 2), a(t + h)];
      position += velocity * h + ((a0 + 2 * a1) * h * h) / 6;
      velocity += ((a0 + 4 * a1 + a2) * h) / 6;
    }
    out[i + 1] = position;
  }
  return out;
}
