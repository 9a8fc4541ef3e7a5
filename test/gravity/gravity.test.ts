import { describe, expect, it } from 'vitest';
import { ballGravity } from '../../analysis/gravity/ballGravity.ts';
import { fallInAir } from '../../analysis/gravity/fallInAir.ts';
import { gravityAgreement, type RigGeometry } from '../../analysis/gravity/gravityAgreement.ts';
import { pitchEffect } from '../../analysis/gravity/pitchEffect.ts';
import { scaleFromGravity } from '../../analysis/gravity/scaleFromGravity.ts';
import { airDensity, airOf, airViscosity } from '../../analysis/theory/air.ts';
import { plainNumbers } from '../../analysis/uncertainty/arithmetic.ts';
import { dualNumbers } from '../../analysis/uncertainty/dual.ts';
import { measuredBy } from '../../analysis/uncertainty/measured.ts';
import { monteCarlo } from '../../analysis/uncertainty/monteCarlo.ts';
import { propagate } from '../../analysis/uncertainty/propagate.ts';
import { seededDraws } from '../../analysis/uncertainty/seededDraws.ts';
import { fallingBall } from '../../fixtures/physics/fallingBall.ts';
import { seededRandom } from '../../fixtures/random.ts';

const gMps2 = 9.8123;
const steel = { diameterM: 0.02, massKg: 0.0327 };
const wood = { diameterM: 0.03, massKg: 0.0106 };
const room = { temperatureC: 21, pressurePa: 100_800, relativeHumidity: 0.45 };
const air = airOf(room);
const truthAir = {
  densityKgpm3: airDensity(21, 100_800, 0.45),
  viscosityPas: airViscosity(21),
};
const afterS = Float64Array.from({ length: 360 }, (_, i) => 0.004 + i * 0.001);

/** Drops by another integration, with another correlation for the drag of a sphere or the program's own. */
function drops(ball: typeof steel, drag: number | 'sphere'): Float64Array {
  const at = fallingBall({ ...ball, gMps2, air: truthAir, drag, buoyancy: true }, 0.5);
  return afterS.map((t) => -at(t).yM);
}

describe('fallInAir', () => {
  it('is the fall of an independent integration for a stated drag coefficient', () => {
    const found = fallInAir(plainNumbers, afterS, 1, {
      gMps2,
      ...wood,
      ...truthAir,
      dragShare: 1,
      addedMass: 0.5,
      dragCoefficient: 0.45,
    });
    // Runge-Kutta of steps up to 5 ms on a smooth motion: far below 1 nm
    drops(wood, 0.45).forEach((d, i) => {
      expect(Math.abs(found[i] - d)).toBeLessThan(1e-9);
    });
  });

  it('carries derivatives: those of a sum over drag, mass and time are what differences give', () => {
    const end = (share: number, massKg: number, stretch: number) =>
      fallInAir(plainNumbers, [0.35], stretch, {
        gMps2,
        ...wood,
        ...truthAir,
        massKg,
        dragShare: share,
        addedMass: 0.5,
      })[0];
    const m = dualNumbers(3);
    const [drop] = fallInAir(m, [0.35], m.input(1, 2), {
      gMps2,
      ...wood,
      ...truthAir,
      massKg: m.input(wood.massKg, 1),
      dragShare: m.input(1, 0),
      addedMass: 0.5,
    });
    const h = 1e-5;
    const differences = [
      (end(1 + h, wood.massKg, 1) - end(1 - h, wood.massKg, 1)) / (2 * h),
      (end(1, wood.massKg * (1 + h), 1) - end(1, wood.massKg * (1 - h), 1)) / (2 * h * wood.massKg),
      (end(1, wood.massKg, 1 + h) - end(1, wood.massKg, 1 - h)) / (2 * h),
    ];
    differences.forEach((d, i) => {
      expect(Math.abs(drop.slope[i] / d - 1)).toBeLessThan(1e-6);
    });
  });
});

describe('ballGravity', () => {
  const common = {
    length: [{ source: 'scale bar length', uRel: 0.0007 }],
    time: [{ source: 'capture rate', uRel: 5e-5 }],
    uDownRad: 0.009,
  };
  const measurement = (ball: typeof steel, drag: number | 'sphere', uFitMps2 = 0.0003) =>
    ballGravity({
      afterS,
      yM: drops(ball, drag).map((d) => -d),
      uYM: new Float64Array(afterS.length).fill(25e-6),
      uFitMps2,
      dof: 357,
      common,
      ball,
      air,
      localGMps2: gMps2,
    });

  it('takes drag, buoyancy and added mass off: what remains is g within the drag curves’ differences', () => {
    // The truth's drag follows another correlation (Clift & Gauvin): 6 % of a drag of 0.1 % of g (steel)
    const steelG = propagate(measurement(steel, 'sphere')).outputs.gMps2;
    expect(Math.abs(steelG.value - gMps2)).toBeLessThan(0.1 * 0.0015 * gMps2);
    const woodG = propagate(measurement(wood, 'sphere')).outputs.gMps2;
    expect(Math.abs(woodG.value - gMps2)).toBeLessThan(
      2 * (woodG.contributions.find((c) => c.source === 'drag of the ball')?.u ?? 0),
    );
  });

  it('has the sensitivities that powers of length and time have', () => {
    const { gMps2: g } = propagate(measurement(steel, 'sphere')).outputs;
    const of = (source: string) =>
      g.contributions.find((c) => c.source === source)?.sensitivity ?? Number.NaN;
    // Length 1, time -2; what air takes (0.1 %) does not scale with them
    expect(Math.abs(of('scale bar length') / g.value - 1)).toBeLessThan(0.002);
    expect(Math.abs(of('capture rate') / g.value + 2)).toBeLessThan(0.004);
    expect(of('positions')).toBe(1);
  });

  it('gives direction of down its second-order share, and agrees with Monte Carlo', () => {
    const { gMps2: g } = propagate(measurement(wood, 'sphere')).outputs;
    const second = g.contributions.find((c) => c.source === 'second-order terms');
    // variance of g θ²/2: 9.81 · 0.009²/√2 = 0.00056 m/s²
    expect(second?.u).toBeCloseTo((gMps2 * 0.009 ** 2) / Math.SQRT2, 5);
    const law = measuredBy(measurement(wood, 'sphere'), 'gMps2', 'ball.g', 'm/s2');
    const drawn = monteCarlo(measurement(wood, 'sphere'), 'gMps2', seededDraws(3), {
      blockTrials: 100,
      mostTrials: 800,
    });
    // 800 trials: u to 1/√1600 = 2.5 %, three of it
    expect(Math.abs(drawn.u / law.u - 1)).toBeLessThan(0.075);
    expect(law.budget.map((row) => row.source)).toContain('drag of the ball');
  });
});

describe('pitchEffect', () => {
  it('makes g smaller for a camera that looks down: the slow end of the fall is the nearer one', () => {
    expect(pitchEffect(2, 0.7)).toBeLessThan(0);
    expect(() => pitchEffect(0, 0.7)).toThrow(RangeError);
  });

  // Shared limits of the core, section C (independent prototype): 1° at 2 m 0.43 % of g for a fall of 0.7 m, at 1 m double, at 5 m × 0.4
  it.each([
    [2, 0.5, 0.22],
    [2, 1, 0.43],
    [2, 2, 0.87],
    [1, 1, 0.87],
    [5, 1, 0.17],
  ])('at %f m, %f° is %f per cent of g', (distanceM, pitchDeg, percentOfG) => {
    const found = 100 * Math.abs(pitchEffect(distanceM, 0.7)) * pitchDeg * (Math.PI / 180);
    // two printed digits of figures that come from a fit of another prototype's fall
    expect(Math.abs(found / percentOfG - 1)).toBeLessThan(0.05);
  });
});

describe('gravityAgreement', () => {
  const rig: RigGeometry = {
    cameraDistanceM: 2,
    fallM: 0.7,
    perDragMps2: 0.001,
    uScaleRel: 0.001,
    uTimeRel: 1e-5,
    uPlaneOffsetM: 0.003,
    uDragRel: 0.1,
  };
  const local = { gMps2: 9.81, uGMps2: 0.001 };

  it('agrees within twice the uncertainty of the difference', () => {
    const found = gravityAgreement({ value: 9.82, u: 0.01 }, local, rig);
    expect(found.agrees).toBe(true);
    expect(found.timesU).toBeCloseTo(0.01 / Math.hypot(0.01, 0.001), 9);
  });

  it('says by how much each cause would have to be off, the likeliest first', () => {
    const found = gravityAgreement({ value: 9.81 * 1.005, u: 0.01 }, local, rig);
    expect(found.agrees).toBe(false);
    const size = Object.fromEntries(found.explanations.map((e) => [e.cause, e.size]));
    // Applying each alone must bring g back
    expect(1.005 * (1 + size.scale)).toBeCloseTo(1, 12);
    expect(1.005 * (1 + size.clock) ** 2).toBeCloseTo(1, 12);
    expect((1.005 * (2 - size.planeOffset)) / 2).toBeCloseTo(1, 12);
    // 0.43 % for 1° (shared limits, section C)
    expect(Math.abs(((180 / Math.PI) * size.pitch) / (-0.5 / 0.43) - 1)).toBeLessThan(0.05);
    expect(found.explanations[3].text).toBe('a camera that looks 1.1° up at the plane of the fall');
    // a drag coefficient would have to be 49 times larger the other way: no explanation
    expect(size.drag).toBeUndefined();
    // 0.5 % is 3.3 u of the plane (10 mm), 5 u of the scale, 250 u of the clock
    expect(found.explanations.map((e) => e.cause)).toEqual(['planeOffset', 'scale', 'clock', 'pitch']);
    expect(found.explanations[1].text).toBe('a scale bar 0.5 % shorter than stated');
    expect(found.explanations[2].text).toBe('a capture rate 0.25 % lower than stated');
    expect(found.explanations[0].text).toBe('the ball 10 mm in front of the plane that was assumed');
  });

  it('takes drag for an explanation where it can be one', () => {
    const found = gravityAgreement({ value: 9.81 * 0.999, u: 0.001 }, local, { ...rig, perDragMps2: 0.02 });
    const drag = found.explanations.find((e) => e.cause === 'drag');
    expect(drag?.size).toBeCloseTo(0.04905, 5);
    expect(drag?.timesU).toBeCloseTo(0.4905, 4);
  });
});

describe('scaleFromGravity', () => {
  const time = [{ source: 'capture rate', uRel: 5e-5 }];
  const local = { gMps2, uGMps2: 0.0005 };
  const pxPerM = 1400;
  const fallOf = (ball: typeof steel, seed: number, noisePx: number, pxPerS = 0) => {
    const random = seededRandom(seed);
    return {
      afterS,
      downPx: drops(ball, 'sphere').map(
        (d, i) => 50 + pxPerS * afterS[i] + pxPerM * d + noisePx * random.gaussian(),
      ),
      uPx: new Float64Array(afterS.length).fill(noisePx),
    };
  };

  it('gives the scale of a fall with drag, with an uncertainty that holds', () => {
    const errors: number[] = [];
    for (let seed = 0; seed < 12; seed++) {
      const found = scaleFromGravity(fallOf(steel, seed, 0.05), local, steel, air, time);
      errors.push(((found?.metrePerPx ?? Number.NaN) * pxPerM - 1) / (found?.uRel ?? Number.NaN));
      // Clock twice (1e-4), local gravity (5e-5), drag (1e-4), positions (about 1e-4 of 360 frames): well below 0.05 %
      expect(found?.uRel).toBeLessThan(5e-4);
    }
    // noise is one of the sources, the others are common to all: none beyond 2.5 u
    expect(Math.max(...errors.map(Math.abs))).toBeLessThan(2.5);
  });

  it('needs neither the release to the millisecond nor a start from rest', () => {
    const found = scaleFromGravity(fallOf(steel, 1, 0.05, 30), local, steel, air, time);
    expect(Math.abs((found?.metrePerPx ?? Number.NaN) * pxPerM - 1)).toBeLessThan(5e-4);
  });

  it('lists clock twice as large as it is, local gravity once', () => {
    const found = scaleFromGravity(fallOf(steel, 2, 0.05), local, steel, air, time);
    const u = Object.fromEntries((found?.contributions ?? []).map((c) => [c.source, c.u]));
    expect(u['capture rate'] / 1e-4).toBeCloseTo(1, 2);
    expect(u['local gravity'] / (0.0005 / gMps2)).toBeCloseTo(1, 2);
    expect(found?.residualsPx).toHaveLength(360);
  });

  it('widens where places scatter more than stated', () => {
    const careless = { ...fallOf(steel, 3, 0.5), uPx: new Float64Array(afterS.length).fill(0.05) };
    const honest = scaleFromGravity(fallOf(steel, 3, 0.5), local, null, air, time);
    const found = scaleFromGravity(careless, local, null, air, time);
    const positions = (s: typeof found) =>
      s?.contributions.find((c) => c.source === 'positions of the ball')?.u ?? Number.NaN;
    expect(Math.abs(positions(found) / positions(honest) - 1)).toBeLessThan(0.15);
  });

  it('has nothing to say of a few points', () => {
    const few = fallOf(steel, 4, 0.05);
    const short = {
      afterS: few.afterS.slice(0, 9),
      downPx: few.downPx.slice(0, 9),
      uPx: few.uPx.slice(0, 9),
    };
    expect(scaleFromGravity(short, local, steel, air, time)).toBeNull();
  });
});
