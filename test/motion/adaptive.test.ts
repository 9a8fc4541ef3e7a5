import { describe, expect, it } from 'vitest';
import { adaptive } from '../../analysis/motion/adaptive.ts';
import type { Piece } from '../../analysis/motion/method.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { benchCell } from '../bench/motion/cell.ts';
import { motionTruths } from '../bench/motion/truths.ts';

/** A bump of acceleration on free fall: a = g + b/(1 + ((t - c)/w)²), its integrals in closed form. */
const [g, b, c, w] = [9.81, 60, 0.25, 0.02];
const bump = (t: number) => (t - c) / w;
const primitive = (s: number) => s * Math.atan(s) - 0.5 * Math.log(1 + s * s);
const truth = {
  y: (t: number) =>
    0.5 * g * t * t + b * w * w * (primitive(bump(t)) - primitive(bump(0))) - b * w * Math.atan(bump(0)) * t,
  v: (t: number) => g * t + b * w * (Math.atan(bump(t)) - Math.atan(bump(0))),
  a: (t: number) => g + b / (1 + bump(t) ** 2),
};
const uM = 20e-6;

function pieceAt(timeS: Float64Array, seed: number, noiseM = uM): Piece {
  const random = seededRandom(seed);
  return {
    timeS,
    valueM: timeS.map((t) => truth.y(t) + noiseM * random.gaussian()),
    uM: new Float64Array(timeS.length).fill(noiseM),
    restUntil: null,
  };
}
const even = (n: number, stepS: number) => Float64Array.from({ length: n }, (_, i) => i * stepS);
const rms = (x: Float64Array, of: (i: number) => number) =>
  Math.sqrt(x.reduce((s, v, i) => s + (v - of(i)) ** 2, 0) / x.length);
/** Two smoothings agree where they differ by no more than this share of their uncertainty: what rounding and the descent leave. */
const same = 0.1;
function expectSame(x: Float64Array, y: Float64Array, u: Float64Array) {
  expect(Math.max(...x.map((v, i) => Math.abs(v - y[i]) / u[i]))).toBeLessThan(same);
}

describe('the default smoother', () => {
  const timeS = even(400, 0.001);
  const piece = pieceAt(timeS, 1);
  const smoothed = adaptive.smooth(piece);

  it('finds velocity and acceleration of a fall with a bump, and their intervals hold them', () => {
    // The bump's own scale is 60 m/s²; a fixed window of 41 points and degree 4 has 1.1 m/s² of noise alone.
    expect(rms(smoothed.acceleration.value, (i) => truth.a(timeS[i]))).toBeLessThan(1);
    expect(rms(smoothed.velocity.value, (i) => truth.v(timeS[i]))).toBeLessThan(0.003);
    let [held, all] = [0, 0];
    for (let seed = 1; seed <= 8; seed++) {
      const { acceleration } = adaptive.smooth(pieceAt(timeS, seed));
      acceleration.value.forEach((a, i) => {
        held += Number(Math.abs(a - truth.a(timeS[i])) <= 1.96 * acceleration.u[i]);
        all++;
      });
    }
    // Some 25 parameters in each of 8 records: 200 independent ones scatter by 1.5 % about 95; three of these.
    expect(held / all).toBeGreaterThan(0.905);
  });

  it('has a wider bandwidth where the acceleration changes fast, nowhere above half the frame rate', () => {
    const at = (t: number) => smoothed.bandwidthHz[Math.round(t / 0.001)];
    expect(at(0.25)).toBeGreaterThan(2 * at(0.08));
    expect(Math.max(...smoothed.bandwidthHz)).toBeLessThanOrEqual(500);
  });

  it('moves with the origin of place and time', () => {
    const moved = adaptive.smooth({
      ...piece,
      timeS: piece.timeS.map((t) => t + 3),
      valueM: piece.valueM.map((y) => y - 1.5),
    });
    expectSame(moved.acceleration.value, smoothed.acceleration.value, smoothed.acceleration.u);
    expectSame(
      moved.position.value.map((y) => y + 1.5),
      smoothed.position.value,
      smoothed.position.u,
    );
  });

  it('divides acceleration by c² and bandwidth by c when time is stretched by c', () => {
    const stretched = adaptive.smooth({ ...piece, timeS: piece.timeS.map((t) => 4 * t) });
    expectSame(
      stretched.acceleration.value.map((a) => 16 * a),
      smoothed.acceleration.value,
      smoothed.acceleration.u,
    );
    expect((stretched.bandwidthHz[200] * 4) / smoothed.bandwidthHz[200]).toBeCloseTo(1, 1);
  });

  it('gives the same backwards', () => {
    const backwards = adaptive.smooth({
      ...piece,
      timeS: piece.timeS.map((_, i) => timeS[399] - timeS[399 - i]),
      valueM: piece.valueM.slice().reverse(),
    });
    // Rounds end and knots move by what was met on the way: a quarter of the uncertainty may differ.
    const difference = backwards.acceleration.value.slice().reverse();
    const off = difference.map((a, i) => (a - smoothed.acceleration.value[i]) / smoothed.acceleration.u[i]);
    expect(rms(off, () => 0)).toBeLessThan(0.25);
  });

  it('goes across gaps and uneven times, less sure beside the gap', () => {
    const random = seededRandom(5);
    const uneven = timeS.map((t) => t + 0.0003 * random.uniform()).filter((_, i) => i < 90 || i > 130);
    const { acceleration } = adaptive.smooth(pieceAt(uneven, 6));
    const within = acceleration.value.filter(
      (a, i) => Math.abs(a - truth.a(uneven[i])) <= 1.96 * acceleration.u[i],
    );
    expect(within.length / uneven.length).toBeGreaterThan(0.85);
    // At the gap's edge against the same instant of the record without a gap.
    expect(acceleration.u[90]).toBeGreaterThan(1.1 * smoothed.acceleration.u[131]);
  });

  it('takes positions of their own uncertainty as such', () => {
    const random = seededRandom(9);
    const bad = piece.valueM.map((y, i) => (i % 10 === 3 ? y + 1e-3 * random.gaussian() : y));
    const u = piece.uM.map((v, i) => (i % 10 === 3 ? 1e-3 : v));
    const found = adaptive.smooth({ ...piece, valueM: bad, uM: u });
    expect(rms(found.acceleration.value, (i) => truth.a(timeS[i]))).toBeLessThan(1.2);
  });

  it('starts from rest where it is told so, and knows the first velocity better for it', () => {
    const random = seededRandom(4);
    const fall: Piece = {
      timeS: even(200, 0.001).map((t) => t + 0.0004),
      valueM: even(200, 0.001).map((t) => 0.5 * g * (t + 0.0004) ** 2 + uM * random.gaussian()),
      uM: new Float64Array(200).fill(uM),
      restUntil: { timeS: 0, uTimeS: 1e-5, valueM: 0, uValueM: 3e-6 },
    };
    const known = adaptive.smooth(fall).velocity;
    const free = adaptive.smooth({ ...fall, restUntil: null }).velocity;
    expect(known.u[0]).toBeLessThan(0.5 * free.u[0]);
    expect(Math.abs(known.value[0] - g * 0.0004)).toBeLessThan(4 * known.u[0]);
  });

  it('finds how much larger the noise is than stated, and how it hangs together', () => {
    const tip = motionTruths().find((t) => t.name === 'tip 50 g');
    if (!tip) throw new Error('no such truth');
    const cell = benchCell(tip, 1000, { uM: 25e-6, lagOne: 0.5, stated: 0.5 }, 3, false);
    expect(cell.noiseFound).toBeGreaterThan(0.85);
    expect(cell.noiseFound).toBeLessThan(1.15);
    // Taken as white and as stated, they hold about two thirds (shared limits, section B).
    expect(cell.covered.acceleration.all).toBeGreaterThan(0.85);
    expect(cell.acceleration.own.core).toBeLessThan(1.3 * cell.acceleration.oracle.core);
  });

  it('behaves with few points, and gives positions alone where there are too few', () => {
    for (const n of [6, 8, 12]) {
      const { acceleration } = adaptive.smooth(pieceAt(even(n, 0.01), n));
      for (const u of acceleration.u) expect(u).toBeGreaterThan(0);
    }
    const { position, acceleration } = adaptive.smooth(pieceAt(even(3, 0.01), 3));
    expect(position.value).toHaveLength(3);
    expect(acceleration.value.every(Number.isNaN)).toBe(true);
  });

  it('costs in proportion to the points', () => {
    const costMs = (n: number) => {
      const long = pieceAt(even(n, 0.5 / n), 2);
      const before = performance.now();
      adaptive.smooth(long);
      return performance.now() - before;
    };
    costMs(2000);
    // Ten times the points; twice that for a machine that others use as well.
    expect(costMs(20_000)).toBeLessThan(20 * costMs(2000));
  });
});
