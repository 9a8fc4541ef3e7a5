import type { Piece } from '../../../analysis/motion/method.ts';
import { bandSolve } from '../../../analysis/motion/snap/banded.ts';
import { valuesAt } from '../../../analysis/motion/snap/curves.ts';
import { snapFit } from '../../../analysis/motion/snap/fit.ts';
import { informationOf } from '../../../analysis/motion/snap/information.ts';
import { scaledPiece } from '../../../analysis/motion/snap/scaled.ts';

/**
 * The truth within the bandwidth of the smoother that the noisy positions of a piece lead to: exact positions through its weights.
 * Position, velocity and acceleration.
 */
export function averagedTruth(piece: Piece, exactM: Float64Array): Float64Array[] {
  const scaled = scaledPiece(piece);
  const { data, density } = snapFit(scaled);
  const { cells, noise } = data;
  const values = exactM.map((y, i) => (y - scaled.cubic(scaled.time[i], 0)) / scaled.unitM);
  const { right } = informationOf(cells, scaled.time, values, scaled.u);
  for (let k = 0; k < right.length; k++) right[k] /= noise;
  bandSolve(density.posterior.factor, cells.size, right);
  return [0, 1, 2].map((derivative) => {
    const unit = scaled.unitM / scaled.spanS ** derivative;
    const smoothed = valuesAt(cells, right, scaled.time, derivative);
    return smoothed.map((v, i) => unit * v + scaled.cubic(scaled.time[i], derivative));
  });
}
