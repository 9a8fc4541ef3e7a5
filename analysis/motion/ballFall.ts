import type { Air } from '../theory/air.ts';
import { freeFallDrag, type Sphere } from '../theory/freeFallDrag.ts';
import { scaledInverse } from './release.ts';
import { inflation } from './residuals.ts';
import type { WorldTrack } from './worldTrack.ts';

/** Least-squares fall of the reference body: y = y0 - v0 τ - g τ²/2 + what air takes away, τ from its release. */
export interface BallFall {
  readonly gMps2: number;
  /** Standard uncertainty of g from the positions alone, their correlation included. */
  readonly uFitMps2: number;
  readonly dof: number;
  /** How much g would change with a drag coefficient 10 % larger; 0 where the air could not be taken into account. */
  readonly perDragMps2: number;
  /** Whether drag and buoyancy were taken into account (diameter and mass stated). */
  readonly air: boolean;
  /** Height at an instant [m] and the fit's standard uncertainty there. */
  heightAt(timeS: number): { readonly yM: number; readonly uYM: number };
  readonly firstS: number;
  readonly lastS: number;
  readonly residualsM: Float64Array;
}

/** Points next to release are left out: release itself is known to a fraction of a frame, and a ball may stick for a moment. */
const framesAfterRelease = 2;
const leastPoints = 10;
/** A fall shorter than this says nothing of g [m]. */
const leastFallM = 0.05;

/**
 * @param releaseS  the body's release
 * @param untilS    end of the fall to use at the latest [s]
 * @param sphere    diameter and mass where they are stated
 */
export function ballFall(
  track: WorldTrack,
  releaseS: number,
  untilS: number,
  frameTimeS: number,
  nominalGMps2: number,
  sphere: Sphere | null,
  air: Air,
): BallFall | null {
  const { timeS, yM, uYM } = track;
  const from = timeS.findIndex((t) => t > releaseS + framesAfterRelease * frameTimeS);
  if (from < 0) return null;
  // The fall ends where the body is lowest (it lands or bounces), short of the contact itself.
  let lowest = from;
  for (let i = from; i < timeS.length && timeS[i] <= untilS; i++) if (yM[i] < yM[lowest]) lowest = i;
  const landed = lowest + 1 < timeS.length && timeS[lowest + 1] <= untilS;
  const to = landed ? lowest - 1 : lowest + 1;
  const n = to - from;
  if (n < leastPoints || yM[from] - yM[to - 1] < leastFallM) return null;

  const used = { timeS: timeS.slice(from, to), yM: yM.slice(from, to), uYM: uYM.slice(from, to) };
  const lagOf = (share: number): Float64Array => {
    if (!sphere) return new Float64Array(n);
    const fall = freeFallDrag(used.timeS, releaseS, nominalGMps2, sphere, air, share);
    return fall.yM.map((y, i) => y + 0.5 * nominalGMps2 * (used.timeS[i] - releaseS) ** 2);
  };
  const lag = lagOf(1);
  const plain = fitParabola(
    used.timeS,
    used.yM.map((y, i) => y - lag[i]),
    used.uYM,
    releaseS,
  );
  if (!plain) return null;
  const lagMore = lagOf(1.1);
  const more = sphere
    ? fitParabola(
        used.timeS,
        used.yM.map((y, i) => y - lagMore[i]),
        used.uYM,
        releaseS,
      )
    : null;

  const standardised = plain.residualsM.map((r, i) => r / (used.uYM[i] * Math.sqrt(1 - 3 / n)));
  const wider = inflation(standardised, 0, n);
  const { coefficients: c, covariance: v } = plain;
  return {
    gMps2: -2 * c[2],
    uFitMps2: 2 * wider * Math.sqrt(v[8]),
    dof: n - 3,
    perDragMps2: more ? -2 * more.coefficients[2] + 2 * c[2] : 0,
    air: sphere !== null,
    heightAt(atS) {
      const tau = atS - releaseS;
      const basis = [1, tau, tau * tau];
      const lagAt = sphere
        ? freeFallDrag(Float64Array.of(atS), releaseS, nominalGMps2, sphere, air).yM[0] +
          0.5 * nominalGMps2 * Math.max(0, tau) ** 2
        : 0;
      let variance = 0;
      for (let p = 0; p < 3; p++) for (let q = 0; q < 3; q++) variance += basis[p] * basis[q] * v[p * 3 + q];
      return { yM: c[0] + c[1] * tau + c[2] * tau * tau + lagAt, uYM: wider * Math.sqrt(variance) };
    },
    firstS: used.timeS[0],
    lastS: used.timeS[n - 1],
    residualsM: plain.residualsM,
  };
}

function fitParabola(timeS: Float64Array, yM: Float64Array, uYM: Float64Array, zeroS: number) {
  const normal = new Float64Array(9);
  const right = new Float64Array(3);
  for (let i = 0; i < timeS.length; i++) {
    const tau = timeS[i] - zeroS;
    const basis = [1, tau, tau * tau];
    const w = 1 / uYM[i] ** 2;
    for (let p = 0; p < 3; p++) {
      right[p] += w * basis[p] * yM[i];
      for (let q = 0; q < 3; q++) normal[p * 3 + q] += w * basis[p] * basis[q];
    }
  }
  const covariance = scaledInverse(normal, 3);
  if (!covariance) return null;
  const coefficients = [0, 1, 2].map((p) => right.reduce((s, r, q) => s + covariance[p * 3 + q] * r, 0));
  const residualsM = timeS.map((t, i) => {
    const tau = t - zeroS;
    return yM[i] - (coefficients[0] + coefficients[1] * tau + coefficients[2] * tau * tau);
  });
  return { coefficients, covariance, residualsM };
}
