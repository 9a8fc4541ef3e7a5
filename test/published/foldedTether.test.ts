import { describe, expect, it } from 'vitest';
import {
  energyExtensionTime,
  energyForm,
  energyShare,
  foldedTetherMomentum,
  momentumExtensionTime,
} from '../../analysis/theory/foldedTether.ts';
import { freeFall } from '../../analysis/theory/freeFall.ts';
import { publishedRows } from './publishedRows.ts';

// Energy form: Hamel 1949; M. G. Calkin & R. H. March, Am. J. Phys. 57 (1989) 154 (both from memory; closed forms derived and
// recomputed). Momentum form: after Cayley 1857 (from memory). Units: length, mass and g are 1.
const rows = publishedRows('folded-tether.csv').map((r) => ({
  gamma: Number(r.gamma),
  s: Number(r.s),
  v2: Number(r.v2),
  a: Number(r.a),
  t: Number(r.t),
}));
// Nine significant digits: rounding is up to 5e-9 of the value.
const digits = 5e-9;

describe('folded tether, energy form', () => {
  it('takes (2π)^(3/2)/Γ(1/4)² = 1.19814 √(L/g) to extension', () => {
    // Γ(1/4) = 3.625609908221908, Abramowitz & Stegun 6.1.10 (from memory); the figure 1.19814 computed from it and by quadrature.
    const closed = (2 * Math.PI) ** 1.5 / 3.625609908221908 ** 2;
    expect(closed).toBeCloseTo(1.19814, 5);
    expect(Math.abs(energyExtensionTime - closed)).toBeLessThan(1e-14);
  });

  it('is over in 85 % of the time of free fall', () => {
    // "85 % of free fall": C. W. Wong, S. H. Youn & K. Yasui, Eur. J. Phys. 28 (2007) (read); 0.8472131 computed.
    expect(energyExtensionTime / Math.SQRT2).toBeCloseTo(0.8472131, 6);
  });

  it('lets a ball drop 0.71777 L until the tether is straight', () => {
    // 4π³/Γ(1/4)⁴, computed
    const fall = freeFall(Float64Array.of(energyExtensionTime), 0, 1);
    expect(fall.yM[0]).toBeCloseTo(-0.71777, 5);
    expect(1 + fall.yM[0]).toBeCloseTo(0.28223, 5);
  });

  it.each([
    // s, v²/gL, a/g, t/√(L/g): computed from the closed forms
    [0.25, 0.583333, 1.38889, 0.690809],
    [0.5, 1.5, 2.5, 0.948025],
    [0.75, 3.75, 8.5, 1.113656],
    [0.9, 9.9, 50.5, 1.177013],
  ])('at s = %f has v² = %f, a = %f at t = %f', (s, v2, a, t) => {
    const { speedMps, accelerationMps2 } = energyForm(s, 1, 1);
    expect(Math.abs(speedMps ** 2 / v2 - 1)).toBeLessThan(1e-6);
    expect(Math.abs(accelerationMps2 / a - 1)).toBeLessThan(3e-6);
    // t has six decimals; s follows with the speed
    expect(Math.abs(energyShare(t) - s)).toBeLessThan(6e-7 * Math.sqrt(v2));
  });

  it('follows the table all the way', () => {
    const energy = rows.filter((r) => r.gamma === 1);
    expect(energy.length).toBeGreaterThan(10);
    for (const { s, v2, a, t } of energy) {
      if (!Number.isFinite(v2)) continue;
      const { speedMps, accelerationMps2 } = energyForm(s, 1, 1);
      expect(Math.abs(speedMps ** 2 - v2)).toBeLessThan(digits * Math.max(1, v2));
      expect(Math.abs(accelerationMps2 - a)).toBeLessThan(digits * Math.max(1, a));
      // The quadrature is Simpson's in θ, good to 1e-7 until the last 2 % of the fall; s follows time with the speed.
      expect(Math.abs(energyShare(t) - s)).toBeLessThan(1e-7 * Math.max(1, Math.sqrt(v2)));
    }
  });
});

describe('folded tether, momentum form', () => {
  it('takes √2 √(L/g): the tip falls freely', () => {
    expect(momentumExtensionTime ** 2).toBeCloseTo(2, 14);
  });

  it('follows the table all the way', () => {
    const momentum = rows.filter((r) => r.gamma === 0 && r.s > 0);
    expect(momentum.length).toBeGreaterThan(10);
    const curve = foldedTetherMomentum(
      Float64Array.from(momentum, (r) => r.t),
      0,
      1,
      1,
    );
    expect(curve.timeS).toHaveLength(momentum.length);
    momentum.forEach(({ s, v2, a }, i) => {
      // times up to 1.41, rounded by up to 5e-9
      expect(Math.abs(-curve.yM[i] - s)).toBeLessThan(1.5 * digits);
      expect(Math.abs(curve.vyMps[i] ** 2 - v2)).toBeLessThan(3 * digits);
      expect(-curve.ayMps2[i]).toBe(a);
    });
  });
});
