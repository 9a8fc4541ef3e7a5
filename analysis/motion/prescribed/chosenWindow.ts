import type { Piece, Smoothed } from '../method.ts';
import { fixedWindow } from './fixedWindow.ts';
import { uOfSum, weightedSum } from './rows.ts';
import { widening } from './widening.ts';

export interface ChosenWindow {
  readonly degree: number;
  /** Odd; all points of the piece where it has fewer. */
  readonly windowFrames: number;
  readonly by: 'stated' | 'least estimated error of the acceleration';
}

const degreesTried = [2, 4];
/** Ratio of one window tried to the next. */
const rung = 1.15;
/** Wider windows cost much and are of no use: at 10 000 frames per second this is 0.4 s. */
const widestFrames = 4001;
/** The error is judged at about so many instants of a piece. */
const judgedAt = 300;
/** Shares of a piece at its ends that are not judged: what happens there would choose for all the rest. */
const endShare = 0.015;

/**
 * Degree and window as stated, else those with the least mean squared error of the acceleration over the piece: variance from the
 * positions' uncertainties plus the squared bias that the pilot's curve would suffer. Cross-validation of positions, the usual
 * choice, knows nothing of the acceleration: it takes windows that are too narrow for it.
 *
 * @returns null when the piece has too few points for the degree
 */
export function chosenWindow(
  piece: Piece,
  pilot: Smoothed,
  degree: number | undefined,
  windowFrames: number | undefined,
): ChosenWindow | null {
  const n = piece.timeS.length;
  if (degree !== undefined && windowFrames !== undefined) {
    return n > degree ? { degree, windowFrames, by: 'stated' } : null;
  }
  const degrees = degree === undefined ? degreesTried : [degree];
  let best: ChosenWindow | null = null;
  let least = Number.POSITIVE_INFINITY;
  const wider = widening(piece, pilot);
  for (const d of degrees) {
    for (const w of windowFrames === undefined ? windowsFor(d, n) : [windowFrames]) {
      if (w <= d || n <= d) continue;
      const error = meanSquaredError(piece, pilot, wider, w, d);
      if (error < least) {
        least = error;
        best = { degree: d, windowFrames: w, by: 'least estimated error of the acceleration' };
      }
    }
  }
  return best;
}

function windowsFor(degree: number, n: number): number[] {
  const windows: number[] = [];
  const most = Math.min(widestFrames, n);
  for (
    let w = degree + 3 - (degree % 2);
    w <= most;
    w = Math.max(w + 2, 2 * Math.round((w * rung) / 2) + 1)
  ) {
    windows.push(w);
  }
  return windows;
}

function meanSquaredError(
  { timeS, uM }: Piece,
  pilot: Smoothed,
  wider: number,
  windowFrames: number,
  degree: number,
): number {
  const n = timeS.length;
  const rowAt = fixedWindow(timeS, windowFrames, degree);
  if (!rowAt) return Number.POSITIVE_INFINITY;
  const from = Math.ceil(endShare * n);
  const stride = Math.max(1, Math.floor(n / judgedAt));
  let sum = 0;
  let count = 0;
  for (let i = from; i < n - from; i += stride) {
    const row = rowAt(i, 2);
    const bias = weightedSum(row, pilot.position.value) - pilot.acceleration.value[i];
    sum += (wider * uOfSum(row, uM)) ** 2 + bias * bias;
    count++;
  }
  return sum / count;
}
