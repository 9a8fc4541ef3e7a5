import type { Sheet } from '../sheet/sheet.ts';

/** Local gravity with its standard uncertainty [m/s²]. */
export interface Gravity {
  readonly gMps2: number;
  readonly uGMps2: number;
}

// Geodetic Reference System 1980 (Moritz, J. Geodesy 74 (2000) 128): equatorial gravity, k = b γp / (a γe) - 1, e².
const equatorialMps2 = 9.7803267715;
const k = 0.001931851353;
const e2 = 0.0066943800229;
const freeAirPerS2 = 3.086e-6;

/** Standard gravity (3rd CGPM 1901), exact by definition. */
export const standardGravityMps2 = 9.80665;
/** Gravity at the Earth's surface lies between 9.76 and 9.83 m/s²; a rectangle of that half width has this standard deviation. */
const uAnywhereMps2 = 0.02;
/** Deviation of real gravity from the normal one (anomalies): five parts in 100 000, as NPL states for its formula. */
const anomalyRel = 5e-5;

/** Normal gravity by Somigliana's closed formula with the free-air correction for height. */
export function normalGravity(latitudeDeg: number, heightM: number): number {
  const sin2 = Math.sin((latitudeDeg * Math.PI) / 180) ** 2;
  return (equatorialMps2 * (1 + k * sin2)) / Math.sqrt(1 - e2 * sin2) - freeAirPerS2 * heightM;
}

/** Gravity at the site: as stated, from latitude and height, or anywhere on Earth where nothing is stated. */
export function siteGravity(site: Sheet['site']): Gravity {
  if (site === undefined) return { gMps2: standardGravityMps2, uGMps2: uAnywhereMps2 };
  if ('gMps2' in site) return { gMps2: site.gMps2, uGMps2: site.uGMps2 ?? anomalyRel * site.gMps2 };
  // A height that is not stated may be anything up to some hundred metres: 300 m are 0.0009 m/s².
  const uHeight = site.heightM === undefined ? 0.001 : 0;
  const gMps2 = normalGravity(site.latitudeDeg, site.heightM ?? 0);
  return { gMps2, uGMps2: Math.hypot(anomalyRel * gMps2, uHeight) };
}
