import type { Piece } from '../method.ts';
import { chosenWindow } from './chosenWindow.ts';
import { medianStepS } from './evenTimes.ts';
import { fixedWindow } from './fixedWindow.ts';
import type { LinearSmoother } from './linearSmoother.ts';
import type { MethodWithSettings, PrescribedMethod } from './prescribedMethod.ts';
import { responseBandwidth } from './responseBandwidth.ts';
import { byRows, type InstantRows, uOfSum, weightedSum } from './rows.ts';

/**
 * Local polynomial of fixed degree and window, all points of equal weight: on even times the filter of Savitzky & Golay. Near the
 * ends the first and last whole window serve for all their points.
 */
export const localPolynomial: PrescribedMethod = {
  name: 'localPolynomial',
  with(settings): MethodWithSettings | null {
    if (settings.method !== 'localPolynomial') return null;
    const { degree, windowFrames } = settings;
    const stated = (value: number | undefined, unit: string) =>
      value === undefined ? 'chosen from the data' : `${value}${unit}`;
    return {
      description: `local polynomial, degree ${stated(degree, '')}, window ${stated(windowFrames, ' frames')}`,
      rateProblem: () => null,
      needsEvenTimes: false,
      smoother(piece, pilot) {
        const chosen = chosenWindow(piece, pilot, degree, windowFrames);
        return chosen && polynomialSmoother(piece, chosen.windowFrames, chosen.degree, chosen.by);
      },
    };
  },
};

function polynomialSmoother(
  { timeS, uM }: Piece,
  windowFrames: number,
  degree: number,
  windowBy: string,
): LinearSmoother | null {
  const rowAt = fixedWindow(timeS, windowFrames, degree);
  if (!rowAt) return null;
  const rows: InstantRows[] = Array.from(timeS.keys(), (i) => ({
    position: rowAt(i, 0),
    velocity: rowAt(i, 1),
    acceleration: rowAt(i, 2),
    jerk: degree >= 3 ? rowAt(i, 3) : null,
  }));
  const stepS = medianStepS(timeS);
  const known = new Map<Float64Array, number>();
  const bandwidth = ({ acceleration: { from, weights } }: InstantRows, i: number): number => {
    let hz = known.get(weights);
    if (hz === undefined) {
      const offsetsS = Float64Array.from(weights, (_, k) => timeS[from + k] - timeS[i]);
      hz = responseBandwidth(weights, offsetsS, 0.5 / stepS);
      known.set(weights, hz);
    }
    return hz;
  };
  return {
    apply: (values) => byRows(rows, (row) => weightedSum(row, values)),
    uNoise: byRows(rows, (row) => uOfSum(row, uM)),
    bandwidthHz: Float64Array.from(rows, bandwidth),
    settings: { degree, windowFrames, halfWindowS: ((windowFrames - 1) / 2) * stepS, windowBy },
  };
}
