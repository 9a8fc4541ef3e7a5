import { makeSampler, sampledFor } from './layer.ts';
import type { BodyModel, Match, Plate } from './match.ts';
import type { Picture } from './track.ts';

/** Tells whether what is left between frame and model looks like a turn of the body about its zero. */
export interface TurnGauge {
  /**
   * Correlation, 0 … 1, of the residual with the change that a small turn would make. A thing that passes in front leaves a
   * residual of another shape.
   */
  likeness(picture: Picture, model: BodyModel, found: Match, plate: Plate, brightness: number): number;
}

export function makeTurnGauge(half: number): TurnGauge {
  const side = 2 * half + 1;
  const sampler = makeSampler(half);
  const a = sampledFor(half);
  const c = sampledFor(half);
  return {
    likeness(picture, model, found, plate, brightness) {
      if (!model.coverage) return 0;
      const wholeX = Math.round(found.xPx);
      const wholeY = Math.round(found.yPx);
      const dx = found.xPx - wholeX;
      const dy = found.yPx - wholeY;
      sampler.sample(model.appearance, dx, dy, a);
      sampler.sample(model.coverage, dx, dy, c);
      let rr = 0;
      let tt = 0;
      let rt = 0;
      for (let row = 0; row < side; row++) {
        const y = wholeY - half + row;
        if (y < 0 || y >= picture.heightPx) continue;
        for (let column = 0; column < side; column++) {
          const x = wholeX - half + column;
          const u = row * side + column;
          if (model.mask[u] === 0 || x < 0 || x >= picture.widthPx) continue;
          const at = y * picture.widthPx + x;
          const behind = brightness * plate.level[at];
          const r = picture.luma[at] - (found.gain * a.value[u] + (1 - c.value[u]) * behind);
          // The look turned by a small angle: derivative along the circle about the zero.
          const turn = found.gain * (a.slopeY[u] * (column - half - dx) - a.slopeX[u] * (row - half - dy));
          rr += r * r;
          tt += turn * turn;
          rt += r * turn;
        }
      }
      return rr > 0 && tt > 0 ? Math.abs(rt) / Math.sqrt(rr * tt) : 0;
    },
  };
}
