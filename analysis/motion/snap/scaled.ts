import type { Piece } from '../method.ts';
import { polynomialFit } from '../polynomialFit.ts';
import { medianStepS } from '../prescribed/evenTimes.ts';
import type { Observation } from './information.ts';

/** A piece in units in which every number is of the order of one: time from 0 to 1, values less their cubic over a typical u. */
export interface Scaled {
  readonly time: Float64Array;
  readonly value: Float64Array;
  readonly u: Float64Array;
  /** Median of the steps from point to point. */
  readonly step: number;
  readonly spanS: number;
  readonly unitM: number;
  /** The cubic's derivative (0 … 3) at a scaled time [m/s^derivative]. */
  cubic(time: number, derivative: number): number;
  /** What rest before the piece says, with the acceleration there [m/s²]. */
  rest(accelerationMps2: number): Observation[];
}

/** The instant of release comes from the same positions as the curve: it counts as if it were known so many times worse. */
const ownData = 2;
/** Least standard uncertainty of rest, in units of a typical u (per unit of time): only to keep the arithmetic in bounds. */
const leastU = 0.01;

export function scaledPiece({ timeS, valueM, uM, restUntil }: Piece): Scaled {
  const n = timeS.length;
  const startS = restUntil ? restUntil.timeS : timeS[0];
  const spanS = timeS[n - 1] - startS;
  const unitM = Float64Array.from(uM).sort()[n >> 1];
  const middleS = startS + spanS / 2;
  const fit = polynomialFit(timeS, valueM, uM, 0, n, middleS, spanS / 2, 3);
  if (!fit) throw new RangeError('scaledPiece: fewer than four different times');
  const cubic = (time: number, derivative: number): number => {
    const s = 2 * time - 1;
    let sum = 0;
    for (let k = 3; k >= derivative; k--) {
      let factor = 1;
      for (let d = 0; d < derivative; d++) factor *= k - d;
      sum = sum * s + factor * fit.coefficients[k];
    }
    return sum * (2 / spanS) ** derivative;
  };
  const time = timeS.map((t) => (t - startS) / spanS);
  return {
    time,
    value: valueM.map((v, i) => (v - cubic(time[i], 0)) / unitM),
    u: uM.map((u) => u / unitM),
    step: medianStepS(timeS) / spanS,
    spanS,
    unitM,
    cubic,
    rest(accelerationMps2) {
      if (!restUntil) return [];
      const uSpeedMps = ownData * restUntil.uTimeS * accelerationMps2;
      return [
        {
          time: 0,
          derivative: 0,
          value: (restUntil.valueM - cubic(0, 0)) / unitM,
          u: Math.max(leastU, restUntil.uValueM / unitM),
        },
        {
          time: 0,
          derivative: 1,
          value: (-cubic(0, 1) * spanS) / unitM,
          u: Math.max(leastU, (uSpeedMps * spanS) / unitM),
        },
      ];
    },
  };
}
