import type { Sheet } from '../sheet/sheet.ts';

export interface LocalGravity {
  readonly gMps2: number;
  readonly uGMps2: number;
}

/** Standard gravity (3rd CGPM, 1901), with an uncertainty that spans the Earth's surface: 9.780 to 9.832 m/s², rectangular. */
export const standardGravity: LocalGravity = { gMps2: 9.80665, uGMps2: 0.015 };

// Real gravity differs from normal gravity by a few parts in 10⁵; NPL states 5e-5 for its formula of the same kind.
const uAnomalyMps2 = 0.0005;
/** A stated value without an uncertainty is trusted to the last digit that one usually writes. */
const uStatedMps2 = 0.001;
/** Height not stated: somewhere from sea level to about 1000 m. */
const assumedHeightM = 300;
const uHeightM = 300;

/** GRS80 (H. Moritz, Geodetic Reference System 1980). */
const equatorMps2 = 9.7803267715;
const somiglianaK = 0.001931851353;
const eccentricitySquared = 0.0066943800229;
/** Decrease with height in free air. */
const freeAirPerS2 = 3.086e-6;

/** Gravity on the GRS80 ellipsoid after Somigliana, less the free-air decrease. */
export function normalGravity(latitudeDeg: number, heightM: number): number {
  const sin2 = Math.sin((latitudeDeg * Math.PI) / 180) ** 2;
  const atSeaLevel = (equatorMps2 * (1 + somiglianaK * sin2)) / Math.sqrt(1 - eccentricitySquared * sin2);
  return atSeaLevel - freeAirPerS2 * heightM;
}

/** Local gravity of a site: as stated, else normal gravity of its latitude and height; without a site standard gravity. */
export function siteGravity(site: Sheet['site']): LocalGravity {
  if (site === undefined) return standardGravity;
  if ('gMps2' in site) return { gMps2: site.gMps2, uGMps2: site.uGMps2 ?? uStatedMps2 };
  const known = site.heightM !== undefined;
  return {
    gMps2: normalGravity(site.latitudeDeg, site.heightM ?? assumedHeightM),
    uGMps2: Math.hypot(uAnomalyMps2, known ? 0 : freeAirPerS2 * uHeightM),
  };
}
