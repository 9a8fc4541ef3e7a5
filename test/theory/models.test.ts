import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { models, type TheoryInput } from '../../analysis/theory/theories.ts';
import { gMps2, lengthM, releaseS, theoryInput } from './theoryInput.ts';

/** Every model with each body that it says it applies to. */
const siblings = models.flatMap((model) =>
  (['tip', 'reference'] as const)
    .filter((role) => model.applies(theoryInput(role, Float64Array.of(0))))
    .map((role) => ({ name: model.name, role, model })),
);

/** Up to 95 % of the energy form's fall, the shortest of all: 1.19814 √(L/g). */
const longestS = 0.95 * 1.19814 * Math.sqrt(lengthM / gMps2);

/** The same question for another tether and another place. */
function asked(role: 'tip' | 'reference', times: number[], scale = 1, g = gMps2): TheoryInput {
  const input = theoryInput(role, Float64Array.from(times));
  return {
    ...input,
    tether: { lengthM: lengthM * scale },
    gravity: { gMps2: g, uGMps2: 0 },
  };
}

describe('models', () => {
  it('all have a name of their own, and each applies to some body', () => {
    expect(new Set(models.map((m) => m.name)).size).toBe(models.length);
    for (const model of models) expect(siblings.map((s) => s.name)).toContain(model.name);
  });

  it('of a tether do not apply without one, nor to the ball', () => {
    const plain = { ...theoryInput('tip', Float64Array.of(0)), tether: undefined };
    const names = models.filter((m) => m.applies(plain)).map((m) => m.name);
    expect(names).toEqual(['freeFall']);
    expect(siblings.filter((s) => s.role === 'reference').map((s) => s.name)).toEqual([
      'freeFall',
      'freeFallDrag',
    ]);
  });

  it('with drag do not apply to a ball of which diameter or mass is not stated', () => {
    const input = theoryInput('reference', Float64Array.of(0));
    for (const field of ['diameterM', 'massKg']) {
      const body = { ...input.body, [field]: undefined };
      expect(models.filter((m) => m.applies({ ...input, body })).map((m) => m.name)).toEqual(['freeFall']);
    }
  });
});

describe.each(siblings)('$name of the $role', ({ model, role }) => {
  const lengths = fc.double({ min: 0.3, max: 3, noNaN: true });
  const gravities = fc.double({ min: 9.78, max: 9.833, noNaN: true });
  const shares = fc.double({ min: 0.02, max: 1, noNaN: true });

  it('rests until release', () => {
    const curve = model.curve(asked(role, [0, releaseS / 2, releaseS]));
    for (const values of [curve.yM, curve.vyMps]) expect(Array.from(values, Math.abs)).toEqual([0, 0, 0]);
  });

  it('starts with g, less what the air takes', () => {
    const { ayMps2 } = model.curve(asked(role, [releaseS + 1e-5]));
    // Added mass and buoyancy of a steel ball in air: 0.02 %
    expect(-ayMps2[0] / gMps2).toBeGreaterThan(0.9995);
    expect(-ayMps2[0] / gMps2).toBeLessThan(1.00001);
  });

  it('falls ever lower and ever faster', () => {
    fc.assert(
      fc.property(lengths, gravities, (scale, g) => {
        const lasts = longestS * Math.sqrt((scale * gMps2) / g);
        const times = Array.from({ length: 120 }, (_, i) => releaseS + ((i + 1) / 120) * lasts);
        const { yM, vyMps, timeS } = model.curve(asked(role, times, scale, g));
        expect(timeS).toHaveLength(times.length);
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
      fc.property(lengths, gravities, shares, (scale, g, share) => {
        const h = 2e-6;
        const t = releaseS + share * longestS * Math.sqrt((scale * gMps2) / g);
        const { yM, vyMps, ayMps2 } = model.curve(asked(role, [t - h, t, t + h], scale, g));
        // Central difference: h²/6 times the third derivative, at most 1e-9 relative up to 95 % of the time; rounding of y,
        // 1e-16 m over h, 1e-10 m/s. What is left is the quadrature's: 1e-7.
        expect(Math.abs((yM[2] - yM[0]) / (2 * h) / vyMps[1] - 1)).toBeLessThan(1e-6);
        expect(Math.abs((vyMps[2] - vyMps[0]) / (2 * h) / ayMps2[1] - 1)).toBeLessThan(1e-5);
      }),
      { numRuns: 60 },
    );
  });

  it('does not depend on when the clock starts or on which instants are asked for', () => {
    const times = [0.1, 0.2, 0.3].map((t) => releaseS + t);
    const whole = model.curve(asked(role, times));
    const alone = model.curve(asked(role, [times[1]]));
    // The integration with drag takes other steps: Runge-Kutta of fourth order, far below a nanometre.
    expect(Math.abs(alone.yM[0] - whole.yM[1])).toBeLessThan(1e-10);
    const later = {
      ...asked(
        role,
        times.map((t) => t + 5),
      ),
      releaseS: releaseS + 5,
    };
    model.curve(later).yM.forEach((y, i) => {
      expect(Math.abs(y - whole.yM[i])).toBeLessThan(1e-12);
    });
  });
});
