import type { WorldTrack } from '../motion/worldTrack.ts';

/**
 * What a body was measured as, and how a model's heights are held against it. Heights in metres and places in the picture are two
 * of its kinds; the fit knows neither.
 */
export interface Measure {
  readonly timeS: Float64Array;
  /** Frame numbers: neighbours may be correlated. */
  readonly frame: Int32Array;
  /** (model - measured)/u at each time, for heights in the world [m]. */
  residuals(heightM: Float64Array): Float64Array;
  /** ∂residual/∂height [1/m]. */
  perMetre(heightM: Float64Array): Float64Array;
}

/** Points from one index up to, not including, another. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
}

/**
 * Heights in metres, as the track has them.
 *
 * @param noiseOverStated  factor on the stated uncertainties where the track scatters more than they say
 */
export function inMetres(track: WorldTrack, { from, to }: Stretch, noiseOverStated = 1): Measure {
  const yM = track.yM.slice(from, to);
  const uYM = track.uYM.slice(from, to).map((u) => u * noiseOverStated);
  return {
    timeS: track.timeS.slice(from, to),
    frame: track.frame.slice(from, to),
    residuals: (heightM) => heightM.map((y, i) => (y - yM[i]) / uYM[i]),
    perMetre: () => uYM.map((u) => 1 / u),
  };
}

interface Place {
  readonly x: number;
  readonly y: number;
}

/** Places of a body in the picture [px], with their standard uncertainty, and where it was sideways in the world [m]. */
export interface PictureTrack {
  readonly timeS: Float64Array;
  readonly frame: Int32Array;
  readonly xPx: Float64Array;
  readonly yPx: Float64Array;
  readonly uPx: Float64Array;
  readonly xM: Float64Array;
}

/** Distance over which the map from world to picture is straight for its derivative [m]. */
const nearM = 1e-5;

/**
 * Places in the picture straight away: the model's height is put through the map from the world to the picture (scale, lens,
 * perspective), and the distance along the direction in which the body's picture moves is what counts.
 *
 * @param toPicture  pixel of a place in the plane of motion, x right and y up [m]
 */
export function inPixels(track: PictureTrack, toPicture: (xM: number, yM: number) => Place): Measure {
  const { timeS, frame, xPx, yPx, uPx, xM } = track;
  const along = (heightM: number, i: number) => {
    const above = toPicture(xM[i], heightM + nearM);
    const below = toPicture(xM[i], heightM - nearM);
    const [dx, dy] = [(above.x - below.x) / (2 * nearM), (above.y - below.y) / (2 * nearM)];
    return { dx, dy, pxPerM: Math.hypot(dx, dy) };
  };
  return {
    timeS,
    frame,
    residuals: (heightM) =>
      heightM.map((height, i) => {
        const { dx, dy, pxPerM } = along(height, i);
        const place = toPicture(xM[i], height);
        return ((place.x - xPx[i]) * dx + (place.y - yPx[i]) * dy) / (pxPerM * uPx[i]);
      }),
    perMetre: (heightM) => heightM.map((height, i) => along(height, i).pxPerM / uPx[i]),
  };
}
