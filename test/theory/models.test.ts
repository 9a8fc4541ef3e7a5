import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { models } from '../../analysis/theory/models/models.ts';
import { slopesByDifferences } from '../../analysis/theory/models/slopesByDifferences.ts';
import { gMps2, lengthM, statedOf } from './theoryInput.ts';

const roles = ['tip', 'reference'] as const;

/** Every model that needs no simulation, with each body that it says it concerns; what is stated has a small end weight. */
const siblings = models
  .filter((model) => !model.expensive)
  .flatMap((model) =>
    roles
      .map((role) => ({ role, stated: statedOf(role, { tipMassKg: 0.01 }) }))
      .filter(({ stated }) => model.concerns(stated) && model.refusal(stated) === null)
      .map(({ role, stated }) => ({ name: model.name, role, model, stated })),
  );

/** 95 % of the shortest fall of all, that of the energy form without end weight: 1.19814 √(L/g). */
const longestS = 0.95 * 1.19814 * Math.sqrt(lengthM / gMps2);

describe('models', () => {
  it('all have a name of their own, and each concerns some body', () => {
    expect(new Set(models.map((m) => m.name)).size).toBe(models.length);
    for (const model of models) expect(roles.some((role) => model.concerns(statedOf(role)))).toBe(true);
  });

  it('are special cases of models that are in the list and stand after them', () => {
    models.forEach((model, i) => {
      for (const name of model.specialCaseOf)
        expect(models.findIndex((m) => m.name === name)).toBeGreaterThan(i);
    });
  });

  it('of a tether do not concern a drop without one, nor the ball', () => {
    const plain = { ...statedOf('tip'), tether: null };
    expect(models.filter((m) => m.concerns(plain)).map((m) => m.name)).toEqual(['freeFall']);
    expect(models.filter((m) => m.concerns(statedOf('reference'))).map((m) => m.name)).toEqual([
      'freeFall',
      'freeFallDrag',
    ]);
  });

  it('with drag refuse a ball of which diameter or mass is not stated, and say which', () => {
    const stated = statedOf('reference');
    for (const field of ['diameterM', 'massKg'] as const) {
      const body = { ...stated.body, [field]: undefined };
      const refusals = models.map((m) => (m.concerns(stated) ? m.refusal({ ...stated, body }) : null));
      expect(refusals.filter((r) => r !== null)).toEqual([`drag needs ${field} of body "ball"`]);
    }
  });

  it('of a tether refuse ends as far apart as it is long, and an end weight against an unknown mass', () => {
    for (const model of models.filter((m) => m.name.startsWith('foldedTether'))) {
      expect(model.refusal(statedOf('tip', { separationM: lengthM }))).toMatch(/check tether\.separationM/);
      expect(model.refusal(statedOf('tip', { tipMassKg: 0.01, massKg: null }))).toMatch(
        /state tether\.massKg/,
      );
      expect(model.refusal(statedOf('tip', { tipMassKg: 0, massKg: null }))).toBeNull();
    }
  });
});

describe.each(siblings)('$name of the $role', ({ model, stated }) => {
  const parameters = model.parameters(stated);
  const start = Object.fromEntries(parameters.map((p) => [p.name, p.start]));
  const shares = fc.double({ min: 0.02, max: 1, noNaN: true });
  const scales = fc.double({ min: 0.3, max: 3, noNaN: true });

  it('has parameters that start within their bounds, each with a unit in its name', () => {
    for (const { name, unit, start: value, bounds } of parameters) {
      expect(value).toBeGreaterThanOrEqual(bounds[0]);
      expect(value).toBeLessThanOrEqual(bounds[1]);
      expect(/(Mps2|M|Kgpm3)$/.test(name)).toBe(unit !== '');
    }
  });

  it('rests until release', () => {
    const { yM, vyMps } = model.fall(Float64Array.of(-0.1, -1e-9, 0), start, stated);
    for (const values of [yM, vyMps]) expect(Array.from(values, Math.abs)).toEqual([0, 0, 0]);
  });

  it('starts with g, less what the air takes', () => {
    const { ayMps2 } = model.fall(Float64Array.of(1e-5), start, stated);
    // Added mass and buoyancy of a steel ball in air: 0.02 %
    expect(-ayMps2[0] / gMps2).toBeGreaterThan(0.9995);
    expect(-ayMps2[0] / gMps2).toBeLessThan(1.00001);
  });

  it('falls ever lower and ever faster', () => {
    fc.assert(
      fc.property(scales, (scale) => {
        const values = { ...start, lengthM: lengthM * scale };
        const times = Float64Array.from(
          { length: 120 },
          (_, i) => ((i + 1) / 120) * longestS * Math.sqrt(scale),
        );
        const { yM, vyMps, untilS } = model.fall(times, values, stated);
        expect(untilS).toBeGreaterThan(times[119]);
        for (let i = 1; i < times.length; i++) {
          expect(yM[i]).toBeLessThan(yM[i - 1]);
          expect(vyMps[i]).toBeLessThan(vyMps[i - 1]);
        }
      }),
      { numRuns: 20 },
    );
  });

  it('has a velocity that is the slope of its position, an acceleration that is the slope of its velocity', () => {
    fc.assert(
      fc.property(shares, (share) => {
        const h = 2e-6;
        const t = share * longestS;
        const { yM, vyMps, ayMps2 } = model.fall(Float64Array.of(t - h, t, t + h), start, stated);
        // Central difference: h²/6 times the third derivative, at most 1e-9 relative up to 95 % of the time; rounding of y,
        // 1e-16 m over h, 1e-10 m/s.
        expect(Math.abs((yM[2] - yM[0]) / (2 * h) / vyMps[1] - 1)).toBeLessThan(1e-6);
        expect(Math.abs((vyMps[2] - vyMps[0]) / (2 * h) / ayMps2[1] - 1)).toBeLessThan(1e-5);
      }),
      { numRuns: 60 },
    );
  });

  it('does not depend on which instants are asked for', () => {
    const whole = model.fall(Float64Array.of(0.1, 0.2, 0.3), start, stated);
    const alone = model.fall(Float64Array.of(0.2), start, stated);
    // The integration with drag takes other steps: Runge-Kutta of fourth order, far below a nanometre.
    expect(Math.abs(alone.yM[0] - whole.yM[1])).toBeLessThan(1e-10);
  });

  it('says how its heights change with each of its parameters', () => {
    const times = Float64Array.from({ length: 24 }, (_, i) => ((i + 1) / 24) * longestS);
    const free = parameters.map((p) => ({ ...p, prior: null }));
    const slopes = model.slopes(times, start, stated);
    const differences = slopesByDifferences((t, v) => model.fall(t, v, stated), times, start, free);
    parameters.forEach(({ name }, j) => {
      if (parameters[j].prior?.u === 0 && slopes[j].every((s) => s === 0)) return;
      const size = Math.max(...differences[j].map(Math.abs));
      differences[j].forEach((d, i) => {
        // Rounding of a difference 1e-16/6e-6, its curvature 4e-11 of the value times a third derivative of up to 1e3
        expect(Math.abs(slopes[j][i] - d), name).toBeLessThan(1e-6 * size + 1e-9);
      });
    });
  });
});
