import { polynomialWindow } from '../../../analysis/motion/prescribed/polynomialWindow.ts';

/** Bias and variance of local polynomials at some instants of a record, by degree and window. */
export interface WindowErrors {
  readonly degree: number;
  readonly windows: readonly number[];
  /** [window][instant] */
  readonly bias: readonly Float64Array[];
  readonly variance: readonly Float64Array[];
}

/** Ratio of one window to the next. */
const rung = 1.18;

/** Errors of a derivative at even times, of all windows from the smallest to the whole record; shifted inwards at the ends. */
export function windowErrors(
  yM: Float64Array,
  truth: Float64Array,
  uM: number,
  stepS: number,
  degree: number,
  derivative: number,
  instants: readonly number[],
): WindowErrors {
  const n = yM.length;
  const windows: number[] = [];
  for (let w = degree + 1 + (degree % 2); w < n; w = Math.max(w + 2, 2 * Math.floor((w * rung) / 2) + 1))
    windows.push(w);
  windows.push(n);
  const bias: Float64Array[] = [];
  const variance: Float64Array[] = [];
  for (const w of windows) {
    const window = polynomialWindow(
      Float64Array.from({ length: w }, (_, k) => k * stepS),
      degree,
    );
    if (!window) throw new RangeError(`no polynomial of degree ${degree} through ${w} points`);
    const known = new Map<number, Float64Array>();
    const b = new Float64Array(instants.length);
    const v = new Float64Array(instants.length);
    instants.forEach((i, k) => {
      const from = Math.max(0, Math.min(n - w, i - (w >> 1)));
      let weights = known.get(i - from);
      if (!weights) {
        weights = window.weights((i - from) * stepS, derivative);
        known.set(i - from, weights);
      }
      let sum = 0;
      let squares = 0;
      for (let p = 0; p < w; p++) {
        sum += weights[p] * yM[from + p];
        squares += weights[p] * weights[p];
      }
      b[k] = sum - truth[i];
      v[k] = squares * uM * uM;
    });
    bias.push(b);
    variance.push(v);
  }
  return { degree, windows, bias, variance };
}

/**
 * Honest oracle: at each instant the degree and window of the least mean squared error, knowing the truth, with the bias replaced
 * by its running maximum over smaller windows, so that no zero crossing of the bias is profited from (shared limits, section B).
 *
 * @returns mean squared error at each instant
 */
export function honestOracle(errors: readonly WindowErrors[]): Float64Array {
  const count = errors[0].bias[0].length;
  return Float64Array.from({ length: count }, (_, k) => {
    let best = Number.POSITIVE_INFINITY;
    for (const { windows, bias, variance } of errors) {
      let most = 0;
      for (let w = 0; w < windows.length; w++) {
        most = Math.max(most, Math.abs(bias[w][k]));
        best = Math.min(best, most * most + variance[w][k]);
      }
    }
    return best;
  });
}

/** Best fixed window: the one degree and window with the least mean squared error over the instants, each counted so many times, knowing the truth. */
export function bestFixed(errors: readonly WindowErrors[], counts: readonly number[]): number {
  let best = Number.POSITIVE_INFINITY;
  for (const { windows, bias, variance } of errors) {
    for (let w = 0; w < windows.length; w++) {
      let sum = 0;
      let n = 0;
      for (let k = 0; k < counts.length; k++) {
        sum += counts[k] * (bias[w][k] ** 2 + variance[w][k]);
        n += counts[k];
      }
      best = Math.min(best, sum / n);
    }
  }
  return Math.sqrt(best);
}
