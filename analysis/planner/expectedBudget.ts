import { fallInAir } from '../gravity/fallInAir.ts';
import { pitchEffect } from '../gravity/pitchEffect.ts';
import { airOf } from '../theory/air.ts';
import { uSphereDragRel } from '../theory/sphereDrag.ts';
import { type Arithmetic, plainNumbers } from '../uncertainty/arithmetic.ts';
import type { Contribution } from '../uncertainty/effectiveDof.ts';
import { leastSquares, solveLinear } from '../uncertainty/linearSystem.ts';
import type { InputQuantity, Measurement } from '../uncertainty/measurement.ts';
import { propagate } from '../uncertainty/propagate.ts';
import { peakAccelerationError, peakSpeedError } from './peakChart.ts';
import type { PlannedQuantity } from './planSchema.ts';
import type { Rig } from './rig.ts';
import { type Shot, uPlaceM } from './shot.ts';

/** What a quantity is expected to come out as. */
export interface ExpectedBudget {
  readonly value: number;
  readonly u: number;
  readonly contributions: readonly Contribution[];
}

/**
 * Expected value and budget of a quantity for a rig and how it is filmed.
 *
 * @param bandwidthHz  of a peak acceleration that is meant within a bandwidth
 * @throws RangeError for a quantity of the tip without a tether, or a peak with fewer than two frames in its half width
 */
export function expectedBudget(
  quantity: PlannedQuantity,
  rig: Rig,
  shot: Shot,
  bandwidthHz?: number,
): ExpectedBudget {
  const { value, u, contributions } = propagate(measurementOf(quantity, rig, shot, bandwidthHz)).outputs.y;
  return { value, u, contributions: contributions.filter((c) => c.u > 0) };
}

type Make = (rig: Rig, shot: Shot, bandwidthHz: number | undefined) => Measurement<string, 'y'>;

const makers: Readonly<Record<PlannedQuantity, Make>> = {
  'ball.g': ballG,
  'tip.peakSpeed': peakSpeed,
  'tip.peakAcceleration': peakAcceleration,
  'tip.extensionTime': extensionTime,
};

function measurementOf(
  quantity: PlannedQuantity,
  rig: Rig,
  shot: Shot,
  bandwidthHz: number | undefined,
): Measurement<string, 'y'> {
  return makers[quantity](rig, shot, bandwidthHz);
}

/** Factor on every length, and on every rate, that scale and clock put in: 1 with its uncertainties. */
function scaleInputs(rig: Rig, shot: Shot): Record<string, InputQuantity> {
  return {
    barM: { source: 'scale bar length', value: shot.barM, u: rig.uBarM, unit: 'm' },
    barPx: {
      source: 'scale bar marks',
      value: shot.barM * shot.pxPerM,
      u: Math.SQRT2 * rig.uMarkPx,
      unit: 'px',
    },
    offsetM: { source: 'plane offset', value: 0, u: rig.uPlaneOffsetM, unit: 'm' },
    lens: { source: 'lens', value: 1, u: rig.uLensRel, unit: '1' },
    pitchRad: { source: 'camera pitch', value: 0, u: rig.uPitchRad, unit: 'rad' },
    rateHz: {
      source: 'capture rate',
      value: shot.captureRateHz,
      u: rig.uCaptureRateRel * shot.captureRateHz,
      unit: 'Hz',
    },
  };
}

function lengthFactor<T>(m: Arithmetic<T>, x: Readonly<Record<string, T>>, rig: Rig, shot: Shot): T {
  const plane = m.divide(m.subtract(rig.distanceM, x.offsetM), rig.distanceM);
  return m.multiply(m.divide(x.barM, x.barPx), shot.pxPerM, plane, x.lens);
}

function rateFactor<T>(m: Arithmetic<T>, x: Readonly<Record<string, T>>, shot: Shot): T {
  return m.divide(x.rateHz, shot.captureRateHz);
}

function ballG(rig: Rig, shot: Shot): Measurement<string, 'y'> {
  const fallS = Math.sqrt((2 * rig.fallM) / rig.gMps2);
  const uM = rig.uPositionPx / shot.pxPerM;
  // Least squares with first speed free: √(720/N) σ/T².
  const uNoise = (Math.sqrt(720 / (fallS * shot.captureRateHz)) * uM) / fallS ** 2;
  const ofPitch = pitchEffect(rig.distanceM, rig.fallM);
  const { ball } = rig;
  const ofDrag = ball ? dragOfG(rig, ball, fallS) : null;
  return {
    inputs: {
      ...scaleInputs(rig, shot),
      positions: { source: 'positions', value: 0, u: uNoise, unit: 'm/s2' },
      ...(ofDrag
        ? { dragShare: { source: 'drag of the ball', value: 1, u: uSphereDragRel, unit: '1' } }
        : {}),
    },
    outputs: (m, x) => {
      const g = m.multiply(
        rig.gMps2,
        lengthFactor(m, x, rig, shot),
        m.power(rateFactor(m, x, shot), 2),
        m.add(1, m.multiply(ofPitch, x.pitchRad)),
      );
      const drag = ofDrag ? m.subtract(m.through(ofDrag, x.dragShare), ofDrag(1)) : 0;
      return { y: m.add(g, x.positions, drag) };
    },
  };
}

/** What drag of a share of the standard curve's adds to g when it is taken off [m/s²]. */
function dragOfG(rig: Rig, ball: NonNullable<Rig['ball']>, fallS: number): (share: number) => number {
  const { densityKgpm3, viscosityPas } = airOf(undefined);
  const at = Array.from({ length: 60 }, (_, i) => ((i + 1) / 60) * fallS);
  return (dragShare) => {
    const drops = fallInAir(plainNumbers, at, 1, {
      gMps2: rig.gMps2,
      ...ball,
      densityKgpm3,
      viscosityPas,
      dragShare,
      addedMass: 0.5,
    });
    const [, , curvature] = leastSquares(
      plainNumbers,
      at.map((t) => [1, t, t * t]),
      drops,
    );
    return -2 * curvature;
  };
}

function tetherOf(rig: Rig): NonNullable<Rig['tether']> {
  if (!rig.tether) throw new RangeError('expectedBudget: a quantity of the tip without a tether');
  return rig.tether;
}

/** A plane that is pitched is seen at another scale at its lower end than over the bar: 2 y/D at y half the fall. */
function atLowerEnd<T>(m: Arithmetic<T>, x: Readonly<Record<string, T>>, lengthM: number, rig: Rig): T {
  return m.subtract(1, m.multiply(lengthM / rig.distanceM, x.pitchRad));
}

function peakSpeed(rig: Rig, shot: Shot): Measurement<string, 'y'> {
  const { lengthM, peakMps2, speedMps, halfWidthS } = tetherOf(rig);
  const noise = uPlaceM(rig, shot) / (peakMps2 * halfWidthS ** 2);
  const uSmooth = speedMps * peakSpeedError(shot.captureRateHz * halfWidthS, noise);
  // The tip turns within a frame: half a frame to either side, in which its speed changes by the peak acceleration.
  const halfFrame = (0.5 * peakMps2) / shot.captureRateHz;
  return {
    inputs: {
      ...scaleInputs(rig, shot),
      positions: { source: 'positions and smoothing', value: 0, u: uSmooth, unit: 'm/s' },
      instant: {
        source: 'between frames',
        value: 0,
        u: halfFrame / Math.sqrt(3),
        unit: 'm/s',
        distribution: 'rectangular',
      },
    },
    outputs: (m, x) => {
      const factor = m.multiply(lengthFactor(m, x, rig, shot), rateFactor(m, x, shot));
      return {
        y: m.add(m.multiply(speedMps, factor, atLowerEnd(m, x, lengthM, rig)), x.positions, x.instant),
      };
    },
  };
}

function peakAcceleration(rig: Rig, shot: Shot, bandwidthHz: number | undefined): Measurement<string, 'y'> {
  const { lengthM, peakMps2, halfWidthS } = tetherOf(rig);
  const uM = uPlaceM(rig, shot);
  const valueMps2 =
    bandwidthHz === undefined ? peakMps2 : peakMps2 * shareInBandwidth(bandwidthHz, halfWidthS);
  const uSmooth =
    bandwidthHz === undefined
      ? peakMps2 * peakAccelerationError(shot.captureRateHz * halfWidthS, uM / (peakMps2 * halfWidthS ** 2))
      : noiseInBandwidth(uM, bandwidthHz, shot.captureRateHz);
  return {
    inputs: {
      ...scaleInputs(rig, shot),
      positions: { source: 'positions and smoothing', value: 0, u: uSmooth, unit: 'm/s2' },
      exposure: {
        source: 'exposure',
        value: 0,
        u: (peakMps2 * shot.exposureS ** 2) / (12 * halfWidthS ** 2),
        unit: 'm/s2',
      },
    },
    outputs: (m, x) => {
      const factor = m.multiply(lengthFactor(m, x, rig, shot), m.power(rateFactor(m, x, shot), 2));
      return {
        y: m.add(m.multiply(valueMps2, factor, atLowerEnd(m, x, lengthM, rig)), x.positions, x.exposure),
      };
    },
  };
}

/** Share of a peak of the form 1/(1 + (t/w)²) that an ideal low pass leaves: its spectrum falls as exp(-2π f w). */
export function shareInBandwidth(bandwidthHz: number, halfWidthS: number): number {
  return 1 - Math.exp(-2 * Math.PI * bandwidthHz * halfWidthS);
}

/**
 * Standard deviation of the second derivative of white noise within a bandwidth: σ²/f_s ∫ (2πf)⁴ df from -B to B, so
 * σ (2π)² B^2.5 √(2/(5 f_s)).
 */
export function noiseInBandwidth(uM: number, bandwidthHz: number, captureRateHz: number): number {
  return uM * (2 * Math.PI) ** 2 * bandwidthHz ** 2.5 * Math.sqrt(2 / (5 * captureRateHz));
}

function extensionTime(rig: Rig, shot: Shot): Measurement<string, 'y'> {
  const { extensionS } = tetherOf(rig);
  return {
    inputs: {
      rateHz: scaleInputs(rig, shot).rateHz,
      extension: {
        source: 'instant of extension',
        value: 0,
        u: 0.5 / shot.captureRateHz / Math.sqrt(3),
        unit: 's',
        distribution: 'rectangular',
      },
      release: {
        source: 'instant of release',
        value: 0,
        u: uReleaseS(rig, shot),
        unit: 's',
      },
    },
    outputs: (m, x) => ({
      y: m.add(m.divide(extensionS, rateFactor(m, x, shot)), x.extension, x.release),
    }),
  };
}

/** How long both bodies are filmed at rest [s]. */
export const restS = 0.1;
/** The release is worked out from this much of the fall [m]. */
const releaseFallM = 0.03;

/** Standard uncertainty of a release from rest frames and the first fall: y0, acceleration and instant free. */
function uReleaseS(rig: Rig, shot: Shot): number {
  const frameS = 1 / shot.captureRateHz;
  const fallS = Math.max(6 * frameS, Math.sqrt((2 * releaseFallM) / rig.gMps2));
  const normal = [0, 1, 2].map(() => [0, 0, 0]);
  for (let t = -restS + frameS / 2; t < fallS; t += frameS) {
    const tau = Math.max(0, t);
    const row = [1, -0.5 * tau * tau, rig.gMps2 * tau];
    row.forEach((a, i) => {
      row.forEach((b, j) => {
        normal[i][j] += a * b;
      });
    });
  }
  const variance = solveLinear(plainNumbers, normal, [0, 0, 1])[2];
  return (rig.uPositionPx / shot.pxPerM) * Math.sqrt(variance);
}
