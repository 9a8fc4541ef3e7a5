import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import type { Picture } from '../../analysis/track/track.ts';
import { type MovingBody, makeMovingBody } from '../../fixtures/movingBody.ts';
import { seededRandom } from '../../fixtures/random.ts';

const boardGrey = 110;

/** Two bodies in one film over an even board, the second in front of the first; noise is added to the whole. */
export function filmOfTwo(
  film: Pick<MovingBody, 'widthPx' | 'heightPx' | 'frameCount'>,
  behind: Pick<MovingBody, 'look' | 'sizePx' | 'path'>,
  inFront: Pick<MovingBody, 'look' | 'sizePx' | 'path'>,
  noiseSigma: number,
  seed: number,
) {
  const back = makeMovingBody({ ...film, ...behind, backgroundGrey: boardGrey });
  const front = makeMovingBody({ ...film, ...inFront, backgroundGrey: boardGrey });
  const random = seededRandom(seed);
  const frames = back.frames.map((picture, n): Picture => {
    const { xPx, yPx } = front.truth;
    const { widthPx } = film;
    const luma = picture.luma.map((v, i) => {
      const reach = Math.hypot((i % widthPx) - xPx[n], Math.floor(i / widthPx) - yPx[n]);
      // Inside the rim the front body; beyond it what it adds to the board, which is all that optics smear there.
      const over = front.frames[n].luma[i];
      const light = reach < inFront.sizePx / 2 ? over : v + over - boardGrey;
      return Math.min(255, Math.max(0, Math.round(light + noiseSigma * random.gaussian())));
    });
    return { ...picture, luma };
  });
  return { frames, truths: [back.truth, front.truth] };
}

/** A sheet with bodies placed where they truly are in frame 0. */
export function sheetOfBodies(
  bodies: readonly { id: string; x: number; y: number; patchPx: number; role?: 'tip' | 'other' }[],
) {
  const sheet: SheetInput = {
    schema: 'tetherfall/sheet/1',
    footage: { path: 'memory' },
    clock: { kind: 'captureRate', captureRateHz: 1000 },
    camera: { exposureS: 0, rowTimeS: 0 },
    scale: {},
    bodies: bodies.map((b) => ({ frame: 0, role: 'other', ...b })),
  };
  return sheetSchema.parse(sheet);
}
