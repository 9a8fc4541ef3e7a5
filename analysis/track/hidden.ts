import { makeSampler, REACH, sampledFor } from './layer.ts';
import type { StillBody } from './learnBody.ts';
import type { BodyModel } from './match.ts';

/** A pixel whose rest level is off by this share of the body's contrast shows something in front of the body. */
const leastShare = 0.06;

/**
 * Pixels in which a body at rest is hidden by something that stays where it is: the jaw of a release hook, a finger, a magnet.
 * There the mean of the rest frames differs from the model that was learned from the body in free flight.
 *
 * @param behind  plate around the rest place, on the window with its border
 * @param dxPx, dyPx  place of the body at rest relative to the still body's zero, |d| ≤ 0.5
 * @returns 1 for hidden pixels, on the window; null when there are none
 */
export function hiddenAtRest(
  still: StillBody,
  behind: Float64Array,
  model: BodyModel,
  dxPx: number,
  dyPx: number,
): Uint8Array | null {
  const { half } = still;
  if (!model.coverage || Math.abs(dxPx) > 0.5 || Math.abs(dyPx) > 0.5) return null;
  const side = 2 * half + 1;
  const wide = side + 2 * REACH;
  const a = sampledFor(half);
  const c = sampledFor(half);
  const sampler = makeSampler(half);
  sampler.sample(model.appearance, dxPx, dyPx, a);
  sampler.sample(model.coverage, dxPx, dyPx, c);
  const hidden = new Uint8Array(side * side);
  const residual = new Float64Array(side * side);
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let row = 0; row < side; row++) {
    for (let column = 0; column < side; column++) {
      const u = row * side + column;
      const at = (row + REACH) * wide + column + REACH;
      const modelled = a.value[u] + (1 - c.value[u]) * behind[at];
      residual[u] = still.mean[at] - modelled;
      if (model.mask[u] === 0) continue;
      low = Math.min(low, modelled);
      high = Math.max(high, modelled);
    }
  }
  const threshold = Math.max((6 * still.noise) / Math.sqrt(still.frames), leastShare * (high - low));
  let any = false;
  for (let row = 0; row < side; row++) {
    for (let column = 0; column < side; column++) {
      const u = row * side + column;
      if (model.mask[u] === 0 || Math.abs(residual[u]) <= threshold) continue;
      any = true;
      // The optics smear what hides over the next pixel too.
      for (let j = Math.max(0, row - 1); j <= Math.min(side - 1, row + 1); j++) {
        for (let i = Math.max(0, column - 1); i <= Math.min(side - 1, column + 1); i++)
          hidden[j * side + i] = 1;
      }
    }
  }
  return any ? hidden : null;
}
