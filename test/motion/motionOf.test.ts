import { describe, expect, it } from 'vitest';
import { adaptive } from '../../analysis/motion/adaptive.ts';
import { motionOf, piecesOf } from '../../analysis/motion/motionOf.ts';
import { noisyTrack } from './worldTracks.ts';

const g = 9.81;
const frames = (n: number, rateHz: number) => Float64Array.from({ length: n }, (_, i) => i / rateHz);

describe('motionOf', () => {
  it('finds free fall after release: 95 % intervals hold the true velocity and acceleration', () => {
    const releaseS = 0.0303;
    const truth = (t: number) => -0.5 * g * Math.max(0, t - releaseS) ** 2;
    let held = { v: 0, a: 0, n: 0 };
    for (let seed = 1; seed <= 25; seed++) {
      const { motion } = motionOf(
        noisyTrack('reference', frames(250, 1000), truth, 20e-6, seed),
        [{ kind: 'release', timeS: releaseS, uTimeS: 0 }],
        0.001,
        adaptive,
      );
      motion.timeS.forEach((t, i) => {
        if (t <= releaseS) return;
        held = {
          n: held.n + 1,
          v: held.v + Number(Math.abs(motion.vyMps[i] + g * (t - releaseS)) <= 1.96 * motion.uVyMps[i]),
          a: held.a + Number(Math.abs(motion.ayMps2[i] + g) <= 1.96 * motion.uAyMps2[i]),
        };
      });
    }
    // Choosing the window from the same data costs a little coverage; 25 records of one window each scatter by about 4 %.
    expect(held.v / held.n).toBeGreaterThan(0.88);
    expect(held.a / held.n).toBeGreaterThan(0.88);
  });

  it('narrows its window where the acceleration changes fast', () => {
    // a = g (1 + 1/((1 - t/T)² + 0.01))/2: from g to 50 g within the record.
    const t = frames(300, 1000);
    const y = new Float64Array(300);
    let v = 0;
    for (let i = 1; i < 300; i++) {
      const fine = 200;
      y[i] = y[i - 1];
      for (let k = 0; k < fine; k++) {
        const s = (t[i - 1] + (k + 0.5) / fine / 1000) / 0.3;
        v -= ((g / 2) * (1 + 1 / ((1 - s) ** 2 + 0.01)) * 0.001) / fine;
        y[i] += (v * 0.001) / fine;
      }
    }
    const { bandwidthHz } = motionOf(
      noisyTrack('tip', t, (x) => y[Math.round(x * 1000)], 10e-6, 3),
      [],
      0.001,
      adaptive,
    );
    expect(bandwidthHz[270]).toBeGreaterThan(1.5 * bandwidthHz[60]);
  });

  it('widens its intervals when positions scatter more than stated', () => {
    const t = frames(200, 1000);
    const stated = noisyTrack('reference', t, () => 0, 20e-6, 4);
    const understated = { ...stated, uXM: stated.uXM.map((u) => u / 3), uYM: stated.uYM.map((u) => u / 3) };
    const honest = motionOf(stated, [], 0.001, adaptive).motion.uVyMps[100];
    const saved = motionOf(understated, [], 0.001, adaptive).motion.uVyMps[100];
    expect(saved / honest).toBeGreaterThan(0.6);
  });

  it('leaves gaps to the neighbours and gives no value at times that were not measured', () => {
    const t = frames(120, 1000).filter((_, i) => i < 50 || i > 60);
    const { motion } = motionOf(
      noisyTrack('reference', t, (x) => -0.5 * g * x * x, 10e-6, 5),
      [],
      0.001,
      adaptive,
    );
    expect(motion.timeS).toEqual([...t]);
  });
});

describe('piecesOf', () => {
  it('parts a record at its breaks, and not where a break is outside', () => {
    const t = Float64Array.of(0, 1, 2, 3, 4, 5);
    expect(piecesOf(t, [2.5, 9, -1])).toEqual([
      { from: 0, to: 3 },
      { from: 3, to: 6 },
    ]);
  });
});
