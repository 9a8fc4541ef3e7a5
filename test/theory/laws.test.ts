import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type Air, airDensity, airOf, airViscosity } from '../../analysis/theory/air.ts';
import {
  energyForm,
  energyShare,
  foldedTetherEnergy,
  foldedTetherMomentum,
} from '../../analysis/theory/foldedTether.ts';
import { freeFall } from '../../analysis/theory/freeFall.ts';
import { freeFallDrag } from '../../analysis/theory/freeFallDrag.ts';
import { siteGravity, standardGravity } from '../../analysis/theory/normalGravity.ts';
import { gMps2, lengthM } from './theoryInput.ts';

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
  const vacuum = freeFall(timeS, 0, gMps2);
  return freeFallDrag(timeS, 0, gMps2, hollow, air, dragShare).yM.map((y, i) => y - vacuum.yM[i]);
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

  it('keeps its energy in energy form', () => {
    fc.assert(
      fc.property(share, (s) => {
        // Units of the tether's mass, length and g. Falling arm: (1 - s)/2 of the mass, moving; energy lost by the whole:
        // the arm's (1 - s)/2 sinks by s, the fold's share is laid down from the arm: m g L (s - s²/2)/2.
        const kinetic = (((1 - s) / 2) * energyForm(s, 1, 1).speedMps ** 2) / 2;
        const potential = (s - (s * s) / 2) / 2;
        expect(Math.abs(kinetic / potential - 1)).toBeLessThan(1e-12);
      }),
    );
  });

  it('scales: lengths with L, times with √(L/g), accelerations with g', () => {
    const positive = fc.double({ min: 0.2, max: 5, noNaN: true });
    fc.assert(
      fc.property(positive, positive, fc.double({ min: 0.05, max: 1.19, noNaN: true }), (length, g, time) => {
        const unit = Math.sqrt(length / g);
        for (const form of [foldedTetherEnergy, foldedTetherMomentum]) {
          const one = form(Float64Array.of(time), 0, 1, 1);
          const other = form(Float64Array.of(time * unit), 0, length, g);
          expect(Math.abs(other.yM[0] / length / one.yM[0] - 1)).toBeLessThan(1e-9);
          expect(Math.abs(other.ayMps2[0] / g / one.ayMps2[0] - 1)).toBeLessThan(1e-6);
        }
      }),
    );
  });

  it('never falls behind a free body, and in momentum form falls with it', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-3, max: 0.36, noNaN: true }), (t) => {
        const at = Float64Array.of(t);
        const free = freeFall(at, 0, gMps2).yM[0];
        expect(foldedTetherEnergy(at, 0, lengthM, gMps2).yM[0]).toBeLessThanOrEqual(free);
        expect(foldedTetherMomentum(at, 0, lengthM, gMps2).yM[0]).toBe(free);
      }),
    );
  });

  it('ends when the tether is straight: nothing is said of later', () => {
    const late = Float64Array.from([0.3, 0.362, 0.364, 0.42, 0.43, 0.5]);
    // 1.19814 and √2 times √(L/g) = 0.30286 s: 0.3629 s and 0.4283 s
    expect(foldedTetherEnergy(late, 0, lengthM, gMps2).timeS).toHaveLength(2);
    expect(foldedTetherMomentum(late, 0, lengthM, gMps2).timeS).toHaveLength(4);
  });

  it('has fallen nothing before release and all after extension', () => {
    expect(energyShare(-1)).toBe(0);
    expect(energyShare(0)).toBe(0);
    expect(energyShare(1.2)).toBe(1);
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
