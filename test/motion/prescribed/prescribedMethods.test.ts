import { describe, expect, it } from 'vitest';
import type { Piece } from '../../../analysis/motion/method.ts';
import { prescribedMethods } from '../../../analysis/motion/prescribed/prescribed.ts';
import { smoothedBy } from '../../../analysis/motion/prescribed/smoothedBy.ts';
import { type MotionSettings, motionMethods } from '../../../analysis/sheet/motionSettings.ts';
import { seededRandom } from '../../../fixtures/random.ts';
import { pieceOf, truthPilot } from './truthPilot.ts';

/** Each method with what it may be told, and with what it finds out by itself. */
const settings: MotionSettings[] = [
  { method: 'localPolynomial', degree: 4, windowFrames: 21 },
  { method: 'localPolynomial', degree: 3, windowFrames: 15 },
  { method: 'localPolynomial' },
  { method: 'quinticSpline' },
  { method: 'butterworth', cutoffHz: 50 },
  { method: 'butterworth' },
  { method: 'channelClass', class: 60, standard: 'SAE J211-1' },
  { method: 'centralDifference', strideFrames: 3 },
];
const stepS = 0.001;
const uM = 20e-6;
const swing = {
  y: (t: number) => 0.02 * Math.cos(25 * t),
  v: (t: number) => -0.5 * Math.sin(25 * t),
  a: (t: number) => -12.5 * Math.cos(25 * t),
};

function bound(s: MotionSettings) {
  const found = prescribedMethods.flatMap((m) => m.with(s) ?? []);
  expect(found).toHaveLength(1);
  return found[0];
}

function smootherOn(s: MotionSettings, piece: Piece, truth = swing) {
  const smoother = bound(s).smoother(piece, truthPilot(piece, truth.y, truth.v, truth.a));
  if (!smoother) throw new Error(`${s.method}: no smoother`);
  return smoother;
}

describe('the methods that a procedure may prescribe', () => {
  it('are all that a sheet can name but the adaptive one', () => {
    expect([...prescribedMethods.map((m) => m.name), 'adaptive'].sort()).toEqual([...motionMethods].sort());
  });

  describe.each(settings.map((s) => [JSON.stringify(s), s] as const))('%s', (_name, s) => {
    const random = seededRandom(5);
    const noisy = pieceOf(161, stepS, swing.y, uM, () => random.gaussian());

    it('gives back a parabola with its derivatives, at the ends as in the middle', () => {
      const smoother = smootherOn(s, noisy);
      const parabola = smoother.apply(noisy.timeS.map((t) => 3 - 2 * t - 4.9 * t * t));
      noisy.timeS.forEach((t, i) => {
        if (Number.isNaN(parabola.acceleration[i])) return;
        // Rounding: positions of 3 m to 4e-16, times up to 6/Δt² for differences of neighbours
        expect(Math.abs(parabola.position[i] - (3 - 2 * t - 4.9 * t * t))).toBeLessThan(1e-9);
        expect(Math.abs(parabola.velocity[i] - (-2 - 9.8 * t))).toBeLessThan(1e-7);
        expect(Math.abs(parabola.acceleration[i] + 9.8)).toBeLessThan(1e-5);
        if (parabola.jerk && !Number.isNaN(parabola.jerk[i]))
          expect(Math.abs(parabola.jerk[i])).toBeLessThan(2e-2);
      });
    });

    it('states the noise that its weights let through, point by point, also of unequal points', () => {
      const uneven = { ...noisy, uM: noisy.uM.map((u, i) => u * (1 + 0.5 * Math.sin(i))) };
      const smoother = smootherOn(s, uneven);
      const n = uneven.timeS.length;
      const sums = ['position', 'velocity', 'acceleration', 'jerk'].map(() => new Float64Array(n));
      const zero = smoother.apply(new Float64Array(n));
      for (let j = 0; j < n; j++) {
        const impulse = new Float64Array(n);
        impulse[j] = uneven.uM[j];
        const { position, velocity, acceleration, jerk } = smoother.apply(impulse);
        [position, velocity, acceleration, jerk ?? zero.position].forEach((response, q) => {
          for (let i = 0; i < n; i++) sums[q][i] += response[i] ** 2;
        });
      }
      const { position, velocity, acceleration, jerk } = smoother.uNoise;
      [position, velocity, acceleration, ...(jerk ? [jerk] : [])].forEach((u, q) => {
        for (let i = 0; i < n; i++) {
          if (Number.isNaN(u[i])) continue;
          // The spline's comes from a numerical derivative, good to a few parts in a thousand; the others from the weights.
          expect(u[i] / Math.sqrt(sums[q][i])).toBeGreaterThan(0.99);
          expect(u[i] / Math.sqrt(sums[q][i])).toBeLessThan(1.01);
        }
      });
    });

    it('passes a wave of its stated bandwidth with 3 dB', () => {
      const smoother = smootherOn(s, noisy);
      const hz = smoother.bandwidthHz[80];
      // The same settings on a record that is long against the wave.
      const chosen = { ...s, ...smoother.settings } as MotionSettings;
      if (chosen.method === 'quinticSpline') return expectSplinePasses(smoother, noisy, hz);
      const long = pieceOf(Math.ceil(12 / hz / stepS) | 1, stepS, swing.y, uM);
      const middle = (long.timeS.length - 1) / 2;
      const wave = long.timeS.map((t) => Math.cos(2 * Math.PI * hz * (t - long.timeS[middle])));
      const gain = smootherOn(chosen, long).apply(wave).acceleration[middle] / -((2 * Math.PI * hz) ** 2);
      // Ends are six periods away; what they still do is below 1 %.
      expect(gain).toBeGreaterThan(0.7);
      expect(gain).toBeLessThan(0.715);
    });

    it('names settings and takes no more time than a wink', () => {
      const long = pieceOf(2000, stepS, swing.y, uM, () => random.gaussian());
      const startMs = performance.now();
      const smoother = smootherOn(s, long);
      // Some 100 ms alone on a core; this machine may be busy.
      expect(performance.now() - startMs).toBeLessThan(2000);
      expect(Object.keys(smoother.settings).length).toBeGreaterThan(0);
    });

    it('has no value for a piece of three points', () => {
      const short = pieceOf(3, stepS, swing.y, uM);
      expect(bound(s).smoother(short, truthPilot(short, swing.y, swing.v, swing.a))).toBeNull();
    });

    it('has 95 % intervals that hold the truth where the acceleration swings', () => {
      let held = 0;
      let count = 0;
      for (let seed = 1; seed <= 12; seed++) {
        const generator = seededRandom(seed);
        const piece = pieceOf(300, stepS, swing.y, uM, () => generator.gaussian());
        const pilot = truthPilot(piece, swing.y, swing.v, swing.a);
        const smoother = bound(s).smoother(piece, pilot);
        if (!smoother) throw new Error('no smoother');
        const { acceleration } = smoothedBy(piece, smoother, pilot);
        piece.timeS.forEach((t, i) => {
          if (Number.isNaN(acceleration.value[i])) return;
          count++;
          if (Math.abs(acceleration.value[i] - swing.a(t)) <= 1.96 * acceleration.u[i]) held++;
        });
      }
      // 12 records of some 15 independent stretches each: the share scatters by 1.6 %, and settings chosen from the data cost some.
      expect(held / count).toBeGreaterThan(0.9);
    });
  });
});

function expectSplinePasses(smoother: ReturnType<typeof smootherOn>, piece: Piece, hz: number): void {
  const wave = piece.timeS.map((t) => Math.cos(2 * Math.PI * hz * (t - piece.timeS[80])));
  const gain = smoother.apply(wave).acceleration[80] / -((2 * Math.PI * hz) ** 2);
  // 80 points to either end are a few periods of the wave.
  expect(gain).toBeGreaterThan(0.69);
  expect(gain).toBeLessThan(0.72);
}
