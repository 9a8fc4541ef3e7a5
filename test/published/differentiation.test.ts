import { describe, expect, it } from 'vitest';
import { adaptive } from '../../analysis/motion/adaptive.ts';
import { methodOf } from '../../analysis/motion/prescribed/methodOf.ts';
import type { MotionSettings } from '../../analysis/sheet/motionSettings.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { pieceOf } from '../motion/prescribed/truthPilot.ts';

const methods: (MotionSettings | undefined)[] = [
  undefined,
  { method: 'localPolynomial' },
  { method: 'quinticSpline' },
  { method: 'butterworth' },
];

interface Signal {
  readonly y: (t: number) => number;
  readonly a: (t: number) => number;
}

/** RMS error of the acceleration over the middle nine tenths, relative to the RMS of the acceleration itself. */
function relativeError(
  settings: MotionSettings | undefined,
  n: number,
  stepS: number,
  u: number,
  { y, a }: Signal,
) {
  const random = seededRandom(17);
  const piece = pieceOf(n, stepS, y, u, () => random.gaussian());
  const { acceleration } = methodOf(settings, adaptive).smooth(piece);
  let [error, size] = [0, 0];
  for (let i = Math.ceil(0.05 * n); i < 0.95 * n; i++) {
    error += (acceleration.value[i] - a(piece.timeS[i])) ** 2;
    size += a(piece.timeS[i]) ** 2;
  }
  return Math.sqrt(error / size);
}

describe.each(methods.map((m) => [m?.method ?? 'default method', m] as const))('%s', (_name, settings) => {
  it('finds free fall with quadratic drag: y = (v²/g) ln cosh(g t/v), a = g/cosh²(g t/v) (textbook)', () => {
    const g = 9.80665;
    const terminalMps = 10;
    const fall: Signal = {
      y: (t) => -((terminalMps ** 2 / g) * Math.log(Math.cosh((g * t) / terminalMps))),
      a: (t) => -g / Math.cosh((g * t) / terminalMps) ** 2,
    };
    // 20 µm at 1000 frames per second: a whole-record fit would be good to 1e-3; residual analysis keeps far too high a cut-off.
    expect(relativeError(settings, 500, 0.001, 20e-6, fall)).toBeLessThan(
      settings?.method === 'butterworth' ? 0.1 : 0.02,
    );
  });

  // Signals of the differentiation literature (van Breugel, Kutz & Brunton, IEEE Access 8 (2020) 196865, from memory): a sine with a
  // chirp on it, and a smooth step. Derivatives in closed form.
  it('finds a sine plus a chirp', () => {
    const k = 12;
    const chirp: Signal = {
      y: (t) => Math.sin(2 * t) + 0.2 * Math.sin(k * t * t),
      a: (t) =>
        -4 * Math.sin(2 * t) + 0.2 * (2 * k * Math.cos(k * t * t) - (2 * k * t) ** 2 * Math.sin(k * t * t)),
    };
    // The chirp ends with 48 rad/s; noise is 0.1 % of the amplitude.
    expect(relativeError(settings, 1000, 0.002, 2e-4, chirp)).toBeLessThan(0.15);
  });

  it('finds a sigmoid step', () => {
    const k = 20;
    const s = (t: number) => 1 / (1 + Math.exp(-k * (t - 0.5)));
    const step: Signal = { y: s, a: (t) => k * k * s(t) * (1 - s(t)) * (1 - 2 * s(t)) };
    expect(relativeError(settings, 500, 0.002, 2e-4, step)).toBeLessThan(0.15);
  });
});
