import type { MotionMethod } from './method.ts';
import { restCurves } from './restCurves.ts';
import { snapSmoother } from './snap/snapSmoother.ts';
import { tooShort } from './tooShort.ts';

/** Positions, with two that rest before the piece stands for, that a curve and its uncertainty need at least. */
const leastPoints = 6;

/** The default: bandwidth, noise and its correlation chosen from the data, at each instant its own bandwidth. */
export const adaptive: MotionMethod = {
  name: 'Gaussian-process smoother: fourth derivative white, its density varying with time by evidence; noise and its correlation from the residuals',
  smooth(piece) {
    if (piece.timeS.length + (piece.restUntil ? 2 : 0) < leastPoints || piece.timeS.length < 4)
      return tooShort(piece);
    return (piece.atRest ? restCurves(piece) : null) ?? snapSmoother(piece);
  },
};
