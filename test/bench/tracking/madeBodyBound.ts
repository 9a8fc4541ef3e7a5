import { type MovingBody, makeMovingBody } from '../../../fixtures/movingBody.ts';
import { LEVELS_16_PER_GREY } from '../../../fixtures/render/sensor.ts';
import { type AxisVariances, meanBound, positionBound, stepPx } from './bound.ts';

/** Grey of the board behind the render that shows where a body covers it. */
const boardGrey = 200;

/** Cramér-Rao bound of a made body's position over the given frames, from the maker's own renders without noise. */
export function madeBodyBound(
  body: MovingBody,
  frames: readonly number[],
  patchPx: number,
  sigma: number,
): AxisVariances {
  const frameTimeS = body.frameTimeS ?? 0.001;
  const filmed = (shiftX: number, shiftY: number, changes: Partial<MovingBody> = {}): Float64Array[] => {
    const film = makeMovingBody({
      ...body,
      ...changes,
      bitDepth: 16,
      noiseSigma: 0,
      frameCount: frames.length,
      // Frame k shows the instants about frame frames[k]: the exposure is shorter than the frame time.
      path: (timeS) => {
        const k = Math.round(timeS / frameTimeS);
        const place = body.path(timeS + (frames[Math.min(k, frames.length - 1)] - k) * frameTimeS);
        return { x: place.x + shiftX, y: place.y + shiftY };
      },
    });
    return film.frames.map(({ luma }) => Float64Array.from(luma, (v) => v / LEVELS_16_PER_GREY));
  };
  const right = filmed(stepPx, 0);
  const left = filmed(-stepPx, 0);
  const below = filmed(0, stepPx);
  const above = filmed(0, -stepPx);
  const onBlack = filmed(0, 0, { background: 'plain', backgroundGrey: 0 });
  const onBoard = filmed(0, 0, { background: 'plain', backgroundGrey: boardGrey });
  return meanBound(
    frames.map((n, k) => {
      const place = body.path(n * frameTimeS);
      return positionBound(
        {
          right: right[k],
          left: left[k],
          below: below[k],
          above: above[k],
          shine: onBlack[k],
          coverage: onBlack[k].map((v, i) => 1 - (onBoard[k][i] - v) / boardGrey),
        },
        body.widthPx,
        { xPx: place.x, yPx: place.y, diameterPx: patchPx },
        sigma,
      );
    }),
  );
}
