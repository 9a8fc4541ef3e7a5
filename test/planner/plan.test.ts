import { describe, expect, it } from 'vitest';
import { expectedBudget, noiseInBandwidth } from '../../analysis/planner/expectedBudget.ts';
import { type Plan, plan } from '../../analysis/planner/plan.ts';
import { type PlanOrderInput, parsePlan, planSchema } from '../../analysis/planner/planSchema.ts';
import { settleRig } from '../../analysis/planner/rig.ts';
import { expectedPeakMps2, tetherPeak } from '../../analysis/planner/tetherPeak.ts';
import { seededRandom } from '../../fixtures/random.ts';

const order = (change: Partial<PlanOrderInput> = {}): PlanOrderInput => ({
  schema: 'tetherfall/plan/1',
  wanted: [{ quantity: 'ball.g', uRel: 0.004 }],
  tether: { lengthM: 1, peakAccelerationMps2: 490.3 },
  ball: { diameterM: 0.02, massKg: 0.0327 },
  picture: { widthPx: 600, heightPx: 1024, fieldHeightM: 1.3 },
  gMps2: 9.80665,
  ...change,
});

function planned(change: Partial<PlanOrderInput> = {}): Plan {
  const found = plan(planSchema.parse(order(change)));
  if (!found.ok) throw new Error(found.problem);
  return found.plan;
}
const problem = (change: Partial<PlanOrderInput>) => {
  const found = plan(planSchema.parse(order(change)));
  return found.ok ? '' : found.problem;
};
const codes = (p: Plan) => p.findings.filter((f) => f.code !== 'assumed').map((f) => f.code);

describe('tetherPeak', () => {
  // Shared limits of the core, section F: speed and half width by length and peak (independent prototype; digits as printed)
  it.each([
    [0.5, 50, 8.8, 5.7],
    [1, 50, 12.4, 8.1],
    [1, 150, 16.3, 3.5],
    [1, 600, 23.1, 1.25],
    [2, 150, 23.1, 5.0],
  ])('of %f m and %i g has a speed of %f m/s and a half width of %f ms', (lengthM, gs, speed, halfMs) => {
    const found = tetherPeak(lengthM, gs * 9.81, 9.81);
    expect(Math.abs(found.speedMps / speed - 1)).toBeLessThan(0.01);
    expect(Math.abs((1000 * found.halfWidthS) / halfMs - 1)).toBeLessThan(0.02);
  });

  // Same, section E: peaks of linked tethers without loss; the rule is good to 20 % (27 % at a separation of 0.02)
  it.each([
    [50, 0.05, 141],
    [100, 0.05, 597],
    [200, 0.1, 2130],
    [100, 0.3, 183],
    [100, 0.5, 26],
  ])('of %i links and a separation of %f is %i g within 20 %%', (links, separation, gs) => {
    expect(Math.abs(expectedPeakMps2(links, separation, 1) / gs - 1)).toBeLessThan(0.2);
  });

  it('refuses a peak that is none', () => {
    expect(() => tetherPeak(1, 9.8, 9.81)).toThrow(RangeError);
  });
});

describe('plan', () => {
  // Shared limits of the core, section F: rate needed for 2 / 5 / 10 % of the peak; positions of 25 µm
  it.each([
    [50, 0.02, 380],
    [50, 0.05, 240],
    [150, 0.02, 1030],
    [150, 0.05, 570],
    [300, 0.02, 2410],
    [300, 0.05, 940],
  ])('of a peak of %i g to %f takes about %i Hz', (gs, uRel, rateHz) => {
    const found = planned({
      wanted: [{ quantity: 'tip.peakAcceleration', uRel }],
      tether: { lengthM: 1, peakAccelerationMps2: gs * 9.80665 },
      // 25 µm at 1000 px/m; nothing but positions limits
      picture: { widthPx: 600, heightPx: 1300, fieldHeightM: 1.3 },
      uPositionPx: 0.025,
      camera: {
        uPitchRad: 1e-6,
        uPlaneOffsetM: 1e-6,
        uLensRel: 1e-6,
        uCaptureRateRel: 1e-6,
        highestCaptureRateHz: 50_000,
      },
      bar: { lengthM: 1, uLengthM: 1e-6, uMarkPx: 1e-3 },
    });
    expect(found.values[0].reached).toBe(true);
    // Steps of usual rates (up to 1.5), and blur and exposure that the table leaves out
    expect(found.captureRateHz / rateHz).toBeGreaterThan(0.7);
    expect(found.captureRateHz / rateHz).toBeLessThan(2);
  });

  it('of g is limited by camera pitch and scale, not by pixels, and says so', () => {
    const found = planned();
    const [g] = found.values;
    expect(g.reached).toBe(true);
    expect(g.limiting).toBe('camera pitch');
    const positions = g.contributions.find((c) => c.source === 'positions');
    expect((positions?.u ?? 1) / g.value).toBeLessThan(0.0005);
    expect(found.pxPerM).toBeCloseTo(1024 / 1.3, 9);
  });

  it('gives for g the noise share of the least-squares fall', () => {
    // Shared limits, section C: 25 ppm at 1000 fps, 0.05 px (2 px/mm), 0.7 m, first speed free
    const settled = settleRig(
      planSchema.parse(order({ fallM: 0.7, picture: { widthPx: 600, heightPx: 2600, fieldHeightM: 1.3 } })),
    );
    if (!settled.ok) throw new Error(settled.problem);
    const shot = { captureRateHz: 1000, exposureS: 1e-5, pxPerM: 2000, barM: 1 };
    const { contributions, value } = expectedBudget('ball.g', settled.rig, shot);
    const positions = contributions.find((c) => c.source === 'positions')?.u ?? Number.NaN;
    expect(Math.abs((1e6 * positions) / value / 25 - 1)).toBeLessThan(0.1);
    const drag = contributions.find((c) => c.source === 'drag of the ball')?.u ?? Number.NaN;
    // steel 20 mm: 0.11 % ignored, a tenth of it with Cd ± 10 %
    expect(Math.abs((100 * drag) / value / 0.011 - 1)).toBeLessThan(0.25);
  });

  it('says what limits where what is wanted is out of reach, and how many pixels would do', () => {
    const found = planned({
      wanted: [{ quantity: 'ball.g', uRel: 0.0005 }],
    });
    expect(found.values[0].reached).toBe(false);
    expect(codes(found)).toEqual(['notReached']);
    expect(found.findings[0].text).toMatch(/ball\.g: 0\.2\d % is expected, 0\.05 % was wanted.*camera pitch/);
    expect(found.pxPerMNeeded).toBeNull();
    expect(found.barNeededM).toBeNull();
  });

  it('asks for no more pixels and bar than are needed', () => {
    const found = planned();
    expect(found.pxPerMNeeded).toBeLessThan(found.pxPerM);
    expect(found.barNeededM).toBeLessThan(found.barM);
    const again = planned({
      bar: { lengthM: found.barNeededM ?? 0 },
      camera: { highestCaptureRateHz: found.captureRateHz },
    });
    expect(again.values[0].reached).toBe(true);
  });

  it('flags a peak of fewer than three frames in its half width and refuses one of fewer than two', () => {
    const wanted = [{ quantity: 'tip.peakAcceleration', uRel: 0.5 }] as const;
    // half width 8.06 ms: 2.5 frames at 310 Hz, all that this camera can
    const thin = planned({ wanted: [...wanted], camera: { highestCaptureRateHz: 310 } });
    expect(thin.captureRateHz).toBe(310);
    expect(codes(thin)).toContain('peakThin');
    const [at247, at249] = [247, 249].map((highestCaptureRateHz) =>
      problem({ wanted: [...wanted], camera: { highestCaptureRateHz } }),
    );
    expect(at247).toMatch(
      /247 Hz is too slow: 2 frames in the half width of the peak, 8\.1 ms, need at least 249 Hz/,
    );
    expect(at249).toBe('');
    const fast = planned({ wanted: [...wanted], camera: { highestCaptureRateHz: 5000 } });
    expect(fast.framesInHalfWidth).toBeGreaterThanOrEqual(3);
    expect(codes(fast)).not.toContain('peakThin');
  });

  it('plans a peak within a bandwidth without needing the peak itself', () => {
    const found = planned({
      wanted: [{ quantity: 'tip.peakAcceleration', uRel: 0.05, bandwidthHz: 20 }],
      tether: { lengthM: 1, peakAccelerationMps2: 3000 },
      camera: { highestCaptureRateHz: 240 },
    });
    const [peak] = found.values;
    expect(peak.bandwidthHz).toBe(20);
    expect(peak.value).toBeLessThan(1000);
    expect(codes(found)).toContain('shareInBandwidth');
    expect(
      problem({
        wanted: [{ quantity: 'tip.peakAcceleration', uRel: 0.05, bandwidthHz: 100 }],
        camera: { highestCaptureRateHz: 240 },
      }),
    ).toMatch(/4 frames in the period of 100 Hz/);
  });

  it('never gets worse with a faster camera, more pixels or a better bar', () => {
    const base = { wanted: [{ quantity: 'tip.peakSpeed' as const, uRel: 0.001 }] };
    const u = (change: Partial<PlanOrderInput>) => planned({ ...base, ...change }).values[0].u;
    const slow = u({ camera: { highestCaptureRateHz: 1000 } });
    expect(u({ camera: { highestCaptureRateHz: 4000 } })).toBeLessThan(slow);
    expect(
      u({
        camera: { highestCaptureRateHz: 1000 },
        picture: { widthPx: 600, heightPx: 2048, fieldHeightM: 1.3 },
      }),
    ).toBeLessThanOrEqual(slow);
    expect(u({ camera: { highestCaptureRateHz: 1000 }, bar: { uLengthM: 1e-5 } })).toBeLessThan(slow);
  });

  it('reckons the footage: frames from rest to past extension, bytes, blur', () => {
    const found = planned({ wanted: [{ quantity: 'tip.extensionTime', u: 0.0003 }] });
    expect(found.captureRateHz).toBe(1000);
    // 0.1 s at rest, 0.3826 s to extension (1.19814 √(L/g)), four half widths of 8.06 ms
    expect(found.filmedS).toBeCloseTo(0.1 + 1.19814 / Math.sqrt(9.80665) + 4 * 0.00806, 3);
    expect(found.frames).toBe(Math.ceil(found.filmedS * 1000));
    expect(found.rawBytes).toBe(found.frames * 600 * 1024);
    expect(found.codedBytes).toBeCloseTo(found.rawBytes / 40, 6);
    expect(found.blurPx).toBeLessThanOrEqual(2);
    expect(found.exposureS).toBeLessThanOrEqual(0.2 * 0.00807);
    // u of an instant within a frame: 1 ms/√12
    expect(found.values[0].limiting).toBe('instant of extension');
    expect(found.values[0].u).toBeGreaterThan(0.001 / Math.sqrt(12));
  });

  it('lists every assumption with its field', () => {
    const texts = planned().findings.map((f) => f.text);
    for (const field of ['uPositionPx', 'bar.lengthM', 'camera.distanceM', 'camera.uPitchRad']) {
      expect(texts.join('\n')).toContain(field);
    }
  });

  it.each<[string, Partial<PlanOrderInput>, RegExp]>([
    [
      'a quantity of the tip without a tether',
      { wanted: [{ quantity: 'tip.peakSpeed', uRel: 0.01 }], tether: undefined },
      /tip\.peakSpeed needs a tether/,
    ],
    [
      'a tether of which no peak can be expected',
      { tether: { lengthM: 1 } },
      /peakAccelerationMps2, or links/,
    ],
    ['a tether longer than the field', { tether: { lengthM: 2, peakAccelerationMps2: 490 } }, /does not fit/],
    ['a fall longer than the field', { fallM: 1.4 }, /fallM: a fall of 1\.4 m does not fit/],
    ['a bar longer than the field', { bar: { lengthM: 1.4 } }, /bar\.lengthM/],
    [
      'a separation longer than the tether',
      { tether: { lengthM: 1, links: 50, separationM: 2 } },
      /is longer than/,
    ],
    ['a peak below gravity', { tether: { lengthM: 1, peakAccelerationMps2: 9 } }, /no more than gravity/],
  ])('refuses %s', (_name, change, message) => {
    expect(problem(change)).toMatch(message);
  });
});

describe('noiseInBandwidth', () => {
  it('is the scatter of the second derivative of white noise through an ideal low pass', () => {
    // Summed over the Fourier lines of 2000 frames of drawn noise
    const random = seededRandom(5);
    const [count, rateHz, bandHz] = [2000, 1000, 60];
    const noise = Array.from({ length: count }, () => random.gaussian());
    let variance = 0;
    for (let k = 1; (k * rateHz) / count <= bandHz; k++) {
      let re = 0;
      let im = 0;
      noise.forEach((x, n) => {
        const phase = (2 * Math.PI * k * n) / count;
        re += x * Math.cos(phase);
        im += x * Math.sin(phase);
      });
      const omega = (2 * Math.PI * k * rateHz) / count;
      variance += (2 * omega ** 4 * (re * re + im * im)) / count ** 2;
    }
    // 120 lines, weighted to the upper end: 10 % scatter
    expect(Math.abs(Math.sqrt(variance) / noiseInBandwidth(1, bandHz, rateHz) - 1)).toBeLessThan(0.3);
  });
});

describe('parsePlan', () => {
  it.each<[unknown, RegExp]>([
    [order({ wanted: [] }), /^wanted: /],
    [order({ wanted: [{ quantity: 'ball.g' }] }), /^wanted\[0\]: needs either u or uRel$/],
    [
      order({ wanted: [{ quantity: 'ball.g', u: 0.1, bandwidthHz: 10 }] }),
      /bandwidthHz belongs to tip\.peakAcceleration/,
    ],
    [{ ...order(), fieldHeightMm: 3 }, /the plan: .*fieldHeightMm/],
    [{ ...order(), bar: { lengthM: -1 } }, /^bar\.lengthM: must be greater than 0$/],
    [{ ...order(), uPositionPx: 0 }, /^uPositionPx: must be greater than 0$/],
    [[], /^the plan: /],
  ])('names the place and what is wrong: %#', (json, line) => {
    const parsed = parsePlan(json);
    expect(parsed.ok ? [] : parsed.problems).toEqual([expect.stringMatching(line)]);
  });
});
