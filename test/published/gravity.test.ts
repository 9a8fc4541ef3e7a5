import { describe, expect, it } from 'vitest';
import { normalGravity, siteGravity, standardGravity } from '../../analysis/theory/normalGravity.ts';
import { publishedRows } from './publishedRows.ts';

const rows = publishedRows('normal-gravity.csv').map((r) => ({
  latitudeDeg: Number(r.latitudeDeg),
  heightM: Number(r.heightM),
  wgs84: Number(r.wgs84h),
  grs80: Number(r.grs80AtSeaLevel),
  npl: Number(r.npl),
}));

describe('normal gravity', () => {
  // H. Moritz, Geodetic Reference System 1980: constants from memory, values computed; the pole agrees with the published one.
  it.each(rows.filter((r) => r.heightM === 0))(
    'is that of GRS80 at $latitudeDeg°',
    ({ latitudeDeg, grs80 }) => {
      // eight decimals in the file
      expect(Math.abs(normalGravity(latitudeDeg, 0) - grs80)).toBeLessThan(6e-9);
      expect(normalGravity(-latitudeDeg, 0)).toBe(normalGravity(latitudeDeg, 0));
    },
  );

  // WGS84 with its second-order height formula: NIMA TR8350.2, equations 4-1 and 4-3 (constants from memory, computed).
  it.each(rows)('agrees with WGS84 at $latitudeDeg°, $heightM m', ({ latitudeDeg, heightM, wgs84 }) => {
    // The ellipsoids differ by 1.5e-6 m/s². The free-air decrease is taken as linear and the same everywhere: 7e-14 s⁻²/m times
    // height squared and 0.07 % of the decrease with latitude, 1.3e-5 m/s² at 3000 m; the program states 5e-4.
    expect(Math.abs(normalGravity(latitudeDeg, heightM) - wgs84)).toBeLessThan(1.5e-5);
  });

  // National Physical Laboratory's formula (read as quoted at albergonmu.blogspot.com/2011/04), good to 5e-5 as it says itself.
  it.each(rows)(
    'agrees with the NPL formula at $latitudeDeg°, $heightM m',
    ({ latitudeDeg, heightM, npl }) => {
      expect(Math.abs(normalGravity(latitudeDeg, heightM) / npl - 1)).toBeLessThan(1e-6);
    },
  );

  // Measured sites (values, latitudes and heights from memory): normal gravity is off by what the program says it may be.
  it.each([
    ['Sèvres', 48.83, 66, 9.80926],
    ['Braunschweig', 52.29, 80, 9.812524],
    ['Gaithersburg', 39.13, 130, 9.80101],
  ])('is within its own uncertainty at %s', (_site, latitudeDeg, heightM, measuredMps2) => {
    const { gMps2, uGMps2 } = siteGravity({ latitudeDeg, heightM });
    expect(Math.abs(gMps2 - measuredMps2)).toBeLessThan(2 * uGMps2);
    // and it does not hide behind a large one: 5e-5 of g
    expect(uGMps2).toBeLessThan(6e-4);
  });

  it('without a site is the standard one, with an uncertainty that spans the Earth', () => {
    // 9.80665 m/s² exactly: 3rd CGPM 1901 (from memory)
    expect(standardGravity.gMps2).toBe(9.80665);
    const span = normalGravity(90, 0) - normalGravity(0, 0);
    // rectangular over pole to equator: span/√12
    expect(Math.abs(standardGravity.uGMps2 / (span / Math.sqrt(12)) - 1)).toBeLessThan(0.02);
  });
});
