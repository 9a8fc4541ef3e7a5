import { makeMovingBody } from '../../../fixtures/movingBody.ts';

const steps = 21;
const boardGrey = 110;

/**
 * Checks the maker before anything is measured with it: the centroid of a disc in front of an even board must lie where the
 * maker was told to put it, at every sub-pixel phase.
 *
 * @returns the largest distance along an axis [px]
 */
export function makerCentroidErrorPx(): number {
  const { frames, truth } = makeMovingBody({
    look: 'disc',
    sizePx: 20,
    widthPx: 48,
    heightPx: 48,
    frameCount: steps,
    bitDepth: 16,
    backgroundGrey: boardGrey,
    path: (timeS) => ({ x: 23 + (1000 * timeS) / steps, y: 24 - (1000 * timeS) / steps }),
  });
  const board = frames[0].luma[0];
  return Math.max(
    ...frames.flatMap(({ luma, widthPx }, n) => {
      let sum = 0;
      let sumX = 0;
      let sumY = 0;
      for (let i = 0; i < luma.length; i++) {
        const light = luma[i] - board;
        sum += light;
        sumX += light * (i % widthPx);
        sumY += light * Math.floor(i / widthPx);
      }
      return [Math.abs(sumX / sum - truth.xPx[n]), Math.abs(sumY / sum - truth.yPx[n])];
    }),
  );
}
