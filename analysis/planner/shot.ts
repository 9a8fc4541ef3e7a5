import type { Rig } from './rig.ts';

/** How the rig is filmed: what the planner is free to choose. */
export interface Shot {
  readonly captureRateHz: number;
  readonly exposureS: number;
  readonly pxPerM: number;
  readonly barM: number;
}

/** Blur beyond this is no longer followed to the bound of the picture's noise [px]. */
export const mostBlurPx = 8;
/** An exposure is chosen so that the fastest body is blurred by no more than this [px]. */
const chosenBlurPx = 2;
/** … and so that averaging over it takes no more than 0.33 % off a peak: τ²/(12 w²) at τ = 0.2 w. */
const exposurePerHalfWidth = 0.2;
/** A camera reads out between exposures. */
const exposurePerFrame = 0.9;

/** Speed of the fastest body that is followed [m/s]: the tip at its end, else the ball. */
export function fastestMps({ tether, gMps2, fallM }: Rig): number {
  const ball = Math.sqrt(2 * gMps2 * fallM);
  return tether ? Math.max(tether.speedMps, ball) : ball;
}

export function blurPx(rig: Rig, { exposureS, pxPerM }: Shot): number {
  return fastestMps(rig) * exposureS * pxPerM;
}

/** Longest exposure that neither blurs nor averages too much, two digits, not below what the camera can do [s]. */
export function chosenExposureS(rig: Rig, captureRateHz: number, pxPerM: number): number {
  const longest = Math.min(
    exposurePerFrame / captureRateHz,
    chosenBlurPx / (fastestMps(rig) * pxPerM),
    rig.tether ? exposurePerHalfWidth * rig.tether.halfWidthS : Number.POSITIVE_INFINITY,
  );
  const place = 10 ** (Math.floor(Math.log10(longest)) - 1);
  return Math.max(rig.shortestExposureS, Number((Math.floor(longest / place) * place).toPrecision(2)));
}

/**
 * Standard uncertainty of a place of the fastest body [m]: blur spreads its edges; the bound of a marker along the motion grows
 * by 1.12, 1.41 and 2.8 at 2, 4 and 8 px of blur (shared limits of the core, section A), here as √(1 + (blur/4)²) and more.
 */
export function uPlaceM(rig: Rig, shot: Shot): number {
  return (rig.uPositionPx / shot.pxPerM) * Math.hypot(1, blurPx(rig, shot) / 4);
}
