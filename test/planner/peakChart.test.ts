import { describe, expect, it } from 'vitest';
import { peakAccelerationError, peakSpeedError } from '../../analysis/planner/peakChart.ts';
import { plainNumbers } from '../../analysis/uncertainty/arithmetic.ts';
import { leastSquares } from '../../analysis/uncertainty/linearSystem.ts';
import { seededRandom } from '../../fixtures/random.ts';

// The pulse a/(1 + t²) with a = w = 1, whose position is known in closed form; error as a share of the peak, or of the speed π.
const position = (t: number) => t * Math.atan(t) - 0.5 * Math.log1p(t * t) + (Math.PI / 2) * t;
const phases = [0.1, 0.3, 0.5, 0.7, 0.9];

interface Window {
  readonly times: number[];
  readonly degree: number;
}

/** Coefficients of a local polynomial through noisy positions: its derivative at 0 is what is looked for. */
function estimate({ times, degree }: Window, readings: readonly number[], derivative: 1 | 2): number {
  const span = Math.max(...times.map(Math.abs));
  const design = times.map((t) => Array.from({ length: degree + 1 }, (_, k) => (t / span) ** k));
  const c = leastSquares(plainNumbers, design, readings);
  return ((derivative === 2 ? 2 : 1) * c[derivative]) / span ** derivative;
}

/** Bias squared plus variance of the estimate of one window, the noise's part by the weights (the estimate is linear). */
function squaredError(window: Window, noise: number, derivative: 1 | 2): number {
  const truth = derivative === 2 ? 1 : Math.PI / 2;
  const bias = estimate(window, window.times.map(position), derivative) - truth;
  const weights = window.times.map((_, i) =>
    estimate(
      window,
      window.times.map((__, j) => (i === j ? 1 : 0)),
      derivative,
    ),
  );
  return bias ** 2 + noise ** 2 * weights.reduce((s, w) => s + w * w, 0);
}

/** Half-windows in frames, from the fewest that carry the polynomial on. */
function halfWindows(fewest: number, m: number): number[] {
  const most = Math.max(fewest + 2, 6 * m);
  const all = Array.from({ length: 24 }, (_, i) => Math.round(fewest * (most / fewest) ** (i / 23)));
  return [...new Set(all)];
}

function best(
  m: number,
  noise: number,
  derivative: 1 | 2,
  degrees: readonly number[],
): Window & { error: number } {
  const candidates = degrees.flatMap((degree) =>
    halfWindows(derivative === 2 ? Math.ceil((degree + 1) / 2) : degree + 1, m).map((half) => {
      const at = (phase: number): Window => ({
        degree,
        times: Array.from({ length: derivative === 2 ? 2 * half : half }, (_, k) =>
          derivative === 2 ? (k - half + phase) / m : -(k + phase) / m,
        ),
      });
      const mean = phases.reduce((s, p) => s + squaredError(at(p), noise, derivative), 0) / phases.length;
      return { ...at(0.5), error: Math.sqrt(mean) / (derivative === 2 ? 1 : Math.PI) };
    }),
  );
  return candidates.reduce((a, b) => (b.error < a.error ? b : a));
}

describe('chart of the peak acceleration', () => {
  it.each([
    [4, 1e-3],
    [4, 1e-2],
    [4, 0.1],
    [8, 3e-3],
    [8, 3e-2],
    [16, 1e-2],
  ])('is what the best local polynomial of degree 6 does at %i frames in w, noise %f', (m, noise) => {
    // stated scatter of the chart: a factor of 1.4
    const ratio = best(m, noise, 2, [6]).error / peakAccelerationError(m, noise);
    expect(ratio).toBeGreaterThan(1 / 1.4);
    expect(ratio).toBeLessThan(1.4);
  });

  it('is what is seen when such estimates are drawn', () => {
    const random = seededRandom(1);
    const window = best(8, 0.01, 2, [6]);
    const draws = 300;
    let squares = 0;
    for (let i = 0; i < draws; i++) {
      const readings = window.times.map((t) => position(t) + 0.01 * random.gaussian());
      squares += (estimate(window, readings, 2) - 1) ** 2;
    }
    const ratio = Math.sqrt(squares / draws) / peakAccelerationError(8, 0.01);
    expect(ratio).toBeGreaterThan(1 / 1.4);
    expect(ratio).toBeLessThan(1.4);
  });

  // Rule of thumb of the same study, for 4 frames and more and errors of 0.3 to 20 %, scatter factor 1.4
  it.each([
    [4, 1e-3],
    [8, 1e-2],
    [16, 3e-2],
    [32, 0.1],
  ])('follows 0.55 z^0.47, z = η/√m, at %i frames, noise %f', (m, noise) => {
    const ratio = peakAccelerationError(m, noise) / (0.55 * (noise / Math.sqrt(m)) ** 0.47);
    expect(ratio).toBeGreaterThan(1 / 1.4);
    expect(ratio).toBeLessThan(1.4);
  });
});

describe('chart of the speed at the end', () => {
  it.each([
    [2, 1e-2],
    [4, 3e-3],
    [8, 1e-2],
    [8, 0.1],
    [16, 3e-3],
  ])(
    'is what the best local polynomial of the frames before does at %i frames in w, noise %f',
    (m, noise) => {
      // the chart was made with windows more finely graded, and its figures have two digits
      const ratio = best(m, noise, 1, [2, 3, 4, 6]).error / peakSpeedError(m, noise);
      expect(ratio).toBeGreaterThan(1 / 1.25);
      expect(ratio).toBeLessThan(1.25);
    },
  );
});

describe('both charts', () => {
  it.each([peakAccelerationError, peakSpeedError])(
    'never promise more for more noise or fewer frames',
    (error) => {
      const ms = [2, 2.5, 3.1, 5, 9, 20, 32, 70, 200];
      const noises = [1e-6, 1e-4, 5e-4, 2e-3, 8e-3, 0.05, 0.1, 0.4, 1];
      for (const m of ms) {
        for (const noise of noises) {
          expect(error(m, 1.3 * noise)).toBeGreaterThanOrEqual(error(m, noise));
          // figures of two digits: 5 % of their rounding
          expect(error(1.3 * m, noise)).toBeLessThanOrEqual(1.05 * error(m, noise));
        }
      }
    },
  );

  it('refuse fewer than two frames in the half width', () => {
    expect(() => peakAccelerationError(1.99, 0.01)).toThrow(/2 are the least/);
    expect(() => peakSpeedError(1.99, 0.01)).toThrow(RangeError);
    expect(() => peakSpeedError(4, 0)).toThrow(/noise 0/);
  });
});
