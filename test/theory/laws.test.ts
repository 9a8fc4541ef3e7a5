import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type Air, airDensity, airOf, airViscosity } from '../../analysis/theory/air.ts';
import { foldedFamily, foldedForces, foldedLaw } from '../../analysis/theory/foldedTether.ts';
import { freeFallDrag } from '../../analysis/theory/freeFallDrag.ts';
import { siteGravity, standardGravity } from '../../analysis/theory/normalGravity.ts';
import { gMps2 } from './theoryInput.ts';

const room: Air = {
  densityKgpm3: airDensity(20, 101_325, 0.5),
  uDensityRel: 0,
  viscosityPas: airViscosity(20),
  assumed: [],
};
const hollow = { diameterM: 0.04, massKg: 0.0027 };
const timeS = Float64Array.from({ length: 50 }, (_, i) => 0.01 * (i + 1));

/** How far a fall lags behind the one without air, at each time. */
function lagOf(air: Air, dragShare = 1): Float64Array {
  const fall = freeFallDrag(timeS, 0, gMps2, hollow, air, dragShare);
  return fall.yM.map((y, i) => y + 0.5 * gMps2 * timeS[i] ** 2);
}

describe('fall with drag', () => {
  it('is free fall where there is no air', () => {
    // Density and viscosity both go, or Stokes' drag would stay.
    for (const share of [1e-3, 1e-6, 1e-9]) {
      const thin = {
        ...room,
        densityKgpm3: share * room.densityKgpm3,
        viscosityPas: share * room.viscosityPas,
      };
      // The lag at full density is 0.1 m after half a second; it shrinks with the density.
      for (const lag of lagOf(thin)) expect(Math.abs(lag)).toBeLessThan(0.1 * share + 1e-13);
    }
  });

  it('lags in proportion to the density while the lag is small', () => {
    const thin = (share: number) =>
      lagOf({ ...room, densityKgpm3: share * room.densityKgpm3, viscosityPas: share * room.viscosityPas });
    const [small, twice] = [thin(1e-4), thin(2e-4)];
    // second order: 1e-4 of the lag's share of the fall, 0.1
    twice.forEach((lag, i) => {
      expect(Math.abs(lag / small[i] - 2)).toBeLessThan(1e-3);
    });
  });

  it('lags the more the larger the drag and the denser the air', () => {
    fc.assert(
      fc.property(fc.double({ min: 1.01, max: 3, noNaN: true }), (more) => {
        const lag = lagOf(room);
        const moreDrag = lagOf(room, more);
        const denser = lagOf({ ...room, densityKgpm3: more * room.densityKgpm3 });
        lag.forEach((base, i) => {
          expect(moreDrag[i]).toBeGreaterThan(base);
          expect(denser[i]).toBeGreaterThan(base);
        });
      }),
      { numRuns: 20 },
    );
  });

  it('without drag keeps buoyancy and added mass', () => {
    const displacedKg = (room.densityKgpm3 * Math.PI * hollow.diameterM ** 3) / 6;
    // a = g (m - m_a)/(m + m_a/2): Lamb, Hydrodynamics, art. 92 (from memory)
    const a = (gMps2 * (hollow.massKg - displacedKg)) / (hollow.massKg + displacedKg / 2);
    const fall = freeFallDrag(timeS, 0, gMps2, hollow, room, 0);
    fall.ayMps2.forEach((found) => {
      expect(Math.abs(-found / a - 1)).toBeLessThan(1e-12);
    });
  });
});

describe('folded tether', () => {
  const share = fc.double({ min: 1e-6, max: 0.998, noNaN: true });
  const kept = fc.double({ min: 0, max: 1, noNaN: true });

  it('loses at the fold what is not kept, and nothing where all is kept', () => {
    fc.assert(
      fc.property(share, kept, (s, gamma) => {
        // Units of the tether's mass, length and g. Energy set free by the whole: s/2 - s²/4; moving: (1 - s)/2 of the mass. What
        // arrives at the fold is (ds/dt)/2 of mass with v²/2: lost is its integral over s of (1 - γ) v²/4, here by Simpson's rule.
        const kinetic = (((1 - s) / 2) * foldedLaw(gamma, s).speed ** 2) / 2;
        const steps = 400;
        let lost = 0;
        for (let i = 0; i < steps; i++) {
          // in ln(1 - s), where the speed near the end is smooth
          const at = (k: number) => 1 - (1 - s) ** (k / steps);
          const [a, m, b] = [at(i), at(i + 0.5), at(i + 1)];
          const f = (x: number) => (((1 - gamma) * foldedLaw(gamma, x).speed ** 2) / 4) * (1 - x);
          lost += ((f(a) + 4 * f(m) + f(b)) / 6) * (-Math.log(1 - s) / steps);
        }
        expect(Math.abs((kinetic + lost) / (s / 2 - (s * s) / 4) - 1)).toBeLessThan(1e-8);
        if (gamma === 1) expect(lost).toBe(0);
      }),
    );
  });

  it('pulls on the anchor with what holds the resting part and stops the falling one', () => {
    fc.assert(
      fc.property(share, kept, (s, gamma) => {
        // Momentum of the whole is A v, A = (1 - s)/2: F = weight - d(A v)/dt, the derivative by differences in time.
        const family = foldedFamily(gamma);
        const t = family.timeOf(s * 0.95);
        const h = 1e-5;
        const momentum = (time: number) => {
          const { share: x, speed } = family.at(time);
          return ((1 - x) / 2) * speed;
        };
        const rate = (momentum(t + h) - momentum(t - h)) / (2 * h);
        const { share: x, speed } = family.at(t);
        // h² times the third derivative of the momentum, at most 1e6 at 95 % of the fall: 1e-4, and rounding 1e-10
        expect(Math.abs(foldedForces(gamma, x, speed).anchor - (1 - rate))).toBeLessThan(1e-4);
      }),
      { numRuns: 40 },
    );
  });

  it('has fallen nothing before release and all after extension', () => {
    const family = foldedFamily(1);
    expect(family.at(-1).share).toBe(0);
    expect(family.at(0).share).toBe(0);
    expect(family.at(1.2).share).toBe(1);
  });

  it('finds the time of a share and the share of a time', () => {
    fc.assert(
      fc.property(share, fc.double({ min: -0.4, max: 2, noNaN: true }), (s, gamma) => {
        const family = foldedFamily(gamma);
        expect(Math.abs(family.at(family.timeOf(s)).share - s)).toBeLessThan(1e-9);
      }),
    );
  });

  it('says how its fall changes with the share of energy kept', () => {
    fc.assert(
      fc.property(share, fc.double({ min: -0.3, max: 1.8, noNaN: true }), (s, gamma) => {
        const t = foldedFamily(gamma).timeOf(s * 0.97);
        const h = 1e-5;
        const slope = (foldedFamily(gamma + h).at(t).share - foldedFamily(gamma - h).at(t).share) / (2 * h);
        // h² times a third derivative that grows towards the end: 1e-5 there
        expect(Math.abs(foldedFamily(gamma).at(t).perGamma - slope)).toBeLessThan(1e-5);
      }),
    );
  });

  it('has no share of energy that keeps it from straightening', () => {
    expect(() => foldedFamily(-1)).toThrow(RangeError);
    expect(() => foldedFamily(Number.NaN)).toThrow(RangeError);
  });
});

describe('what the sheet does not state', () => {
  it('of the air is taken as a room, said, and made uncertain', () => {
    const stated = airOf({ temperatureC: 20, pressurePa: 101_325, relativeHumidity: 0.5 });
    const unstated = airOf(undefined);
    expect(stated.assumed).toEqual([]);
    expect(unstated.assumed).toHaveLength(3);
    expect(unstated.densityKgpm3).toBe(stated.densityKgpm3);
    expect(unstated.uDensityRel).toBeGreaterThan(10 * stated.uDensityRel);
    // A cool room some 500 m up: within two of it
    const high = airDensity(15, 95_000, 0.3);
    expect(Math.abs(high / unstated.densityKgpm3 - 1)).toBeLessThan(2 * unstated.uDensityRel);
  });

  it('of gravity is taken as standard; a height not stated widens it', () => {
    expect(siteGravity(undefined)).toEqual(standardGravity);
    const withHeight = siteGravity({ latitudeDeg: 52, heightM: 0 });
    const without = siteGravity({ latitudeDeg: 52 });
    expect(without.uGMps2).toBeGreaterThan(withHeight.uGMps2);
    // A site at the sea is 300 m below what is assumed: 3.1e-6 s⁻² times 300 m, one of its uncertainties
    expect(Math.abs(without.gMps2 - withHeight.gMps2)).toBeLessThan(2 * without.uGMps2);
  });

  it('of a stated gravity is its last digit', () => {
    expect(siteGravity({ gMps2: 9.81 })).toEqual({ gMps2: 9.81, uGMps2: 0.001 });
    expect(siteGravity({ gMps2: 9.8123, uGMps2: 0.0001 })).toEqual({ gMps2: 9.8123, uGMps2: 0.0001 });
  });
});
