import { leastPoints } from './levelled.ts';
import { lowPass, twoRunShare } from './lowPass.ts';
import type { MethodWithSettings, PrescribedMethod } from './prescribedMethod.ts';
import { cutoffByResiduals } from './residualAnalysis.ts';
import { zeroPhaseSmoother } from './zeroPhaseSmoother.ts';

/** A cut-off nearer to half the frame rate than this share is no low-pass any more. */
const mostShare = 0.9;

/** Second-order Butterworth low-pass of positions, forward and backward, then central differences. */
export const butterworth: PrescribedMethod = {
  name: 'butterworth',
  with(settings): MethodWithSettings | null {
    if (settings.method !== 'butterworth') return null;
    const { cutoffHz } = settings;
    return {
      description: `Butterworth low-pass, second order, forward and backward, cut-off ${cutoffHz === undefined ? 'by residual analysis' : `${cutoffHz} Hz`}`,
      rateProblem(frameRateHz) {
        if (cutoffHz === undefined || cutoffHz <= (mostShare * frameRateHz) / 2) return null;
        return `a cut-off of ${cutoffHz} Hz needs at least ${Math.ceil((2 * cutoffHz) / mostShare)} frames per second, and the footage has ${Number(frameRateHz.toPrecision(6))}`;
      },
      needsEvenTimes: true,
      smoother(piece) {
        const n = piece.timeS.length;
        if (n < leastPoints) return null;
        const stepS = (piece.timeS[n - 1] - piece.timeS[0]) / (n - 1);
        const used = cutoffHz ?? cutoffByResiduals(piece.valueM, stepS);
        const filter = lowPass(Math.tan(Math.PI * used * stepS) / twoRunShare);
        return zeroPhaseSmoother(piece, filter, used, {
          cutoffHz: used,
          cutoffBy: cutoffHz === undefined ? 'residual analysis' : 'stated',
        });
      },
    };
  },
};
