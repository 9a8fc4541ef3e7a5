import { describe, expect, it } from 'vitest';
import { prescribedMethods } from '../../analysis/motion/prescribed/prescribed.ts';
import { simultaneousFactor } from '../../analysis/motion/simultaneousBand.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { pieceOf, truthPilot } from './prescribed/truthPilot.ts';

describe('simultaneousFactor', () => {
  it.each([
    { method: 'localPolynomial', degree: 4, windowFrames: 25 },
    { method: 'butterworth', cutoffHz: 40 },
    { method: 'quinticSpline' },
  ] as const)('makes a band that holds the whole curve in 95 of 100 records: $method', (settings) => {
    const records = 200;
    const zero = () => 0;
    let whole = 0;
    let pointwise = 0;
    const shape = pieceOf(301, 0.001, zero, 1e-5, seededRandom(1).gaussian);
    const smoother = prescribedMethods
      .flatMap((m) => m.with(settings) ?? [])[0]
      .smoother(
        { ...shape, valueM: shape.timeS.map((t) => 0.01 * Math.sin(40 * t)) },
        truthPilot(shape, zero, zero, zero),
      );
    if (!smoother) throw new Error('no smoother');
    const k = simultaneousFactor(Array.from(shape.timeS), smoother.bandwidthHz);
    for (let seed = 1; seed <= records; seed++) {
      const random = seededRandom(seed);
      const { acceleration } = smoother.apply(shape.timeS.map(() => 1e-5 * random.gaussian()));
      const furthest = acceleration.reduce(
        (most, a, i) => Math.max(most, Math.abs(a) / smoother.uNoise.acceleration[i]),
        0,
      );
      if (furthest <= k) whole++;
      if (furthest <= 1.96) pointwise++;
    }
    // Of 200 at 95 %, fewer than 183 have a chance of 2 %; pointwise intervals do not do it.
    expect(whole / records).toBeGreaterThan(0.915);
    expect(pointwise / records).toBeLessThan(0.5);
  });

  it('grows with the record, slowly', () => {
    const times = (n: number) => Array.from({ length: n }, (_, i) => i * 0.001);
    const at = (n: number) => simultaneousFactor(times(n), new Float64Array(n).fill(50));
    expect(at(10_000)).toBeGreaterThan(at(100));
    expect(at(10_000)).toBeLessThan(2 * at(100));
  });
});
