import { type SheetInput, sheetSchema } from '../../../analysis/sheet/sheet.ts';
import { type MovingBody, makeMovingBody } from '../../../fixtures/movingBody.ts';
import { frameTimeS, type MadeBody, restFrames } from './madeBodies.ts';
import { madeBodyBound } from './madeBodyBound.ts';
import { spreadOver } from './spreadOver.ts';
import type { Subject } from './subject.ts';

/** An odd patch that holds the body and a little of what is around it. */
function patchFor(sizePx: number): number {
  return 2 * Math.ceil(0.65 * sizePx + 1) + 1;
}

/** Films a body into memory; it is placed where it truly is in frame 0. */
export function madeSubject({ name, goal, body }: MadeBody, instants: number): Subject {
  const { frames, truth } = makeMovingBody(body);
  const patchPx = patchFor(body.sizePx);
  const extendsAt = body.frameCount - 1;
  // Rounding to whole grey levels is a noise of its own.
  const sigma = Math.sqrt((body.noiseSigma ?? 0) ** 2 + 1 / 12);
  return {
    name,
    pictures: frames,
    sheet: sheetFor(body, truth.xPx[0], truth.yPx[0]),
    bodies: [
      {
        id: 'body',
        goal,
        xPx: truth.xPx,
        yPx: truth.yPx,
        bound: madeBodyBound(body, spreadOver(restFrames, extendsAt, instants), patchPx, sigma),
      },
    ],
    movesFrom: restFrames,
    extendsAt,
  };
}

export function sheetFor(body: MovingBody, xPx: number, yPx: number) {
  const sheet: SheetInput = {
    schema: 'tetherfall/sheet/1',
    footage: { path: 'memory' },
    clock: { kind: 'captureRate', captureRateHz: 1 / (body.frameTimeS ?? frameTimeS) },
    camera: { exposureS: body.exposureS ?? 0, rowTimeS: body.rowTimeS ?? 0 },
    scale: {},
    bodies: [{ id: 'body', role: 'tip', frame: 0, x: xPx, y: yPx, patchPx: patchFor(body.sizePx) }],
  };
  return sheetSchema.parse(sheet);
}
