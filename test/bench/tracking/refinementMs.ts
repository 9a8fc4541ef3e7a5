import { startLearner } from '../../../analysis/track/learner.ts';
import { makeMatcher } from '../../../analysis/track/match.ts';
import { halfOf, patchModel } from '../../../analysis/track/patchModel.ts';
import { plateOf } from '../../../analysis/track/plate.ts';
import { startRest } from '../../../analysis/track/rest.ts';
import { startSampling } from '../../../analysis/track/sampling.ts';
import { trackability } from '../../../analysis/track/trackability.ts';
import type { FilmedBody, Subject } from './subject.ts';

const warmCalls = 300;
const timedCalls = 400;
/** Start of each refinement, off the truth by 0.1 px. */
const startPx = 0.1 / Math.SQRT2;

/** Median time of one Gauss-Newton match from 0.1 px off, in frames of the motion, with everything warm [ms]. */
export function refinementMs(
  { pictures, movesFrom, extendsAt }: Subject,
  body: FilmedBody,
  placed: { readonly x: number; readonly y: number; readonly patchPx?: number },
): number {
  const patchPx = placed.patchPx ?? Number.NaN;
  const half = halfOf(patchPx);
  const [centreX, centreY] = [Math.round(placed.x), Math.round(placed.y)];
  const judgedPlace = trackability(pictures[0], centreX, centreY, half);
  const noise = judgedPlace.ok ? judgedPlace.noise : Number.NaN;
  const rest = startRest(pictures[0], placed.x, placed.y, patchPx, noise);
  pictures.slice(1).every((p) => rest.push(p));
  const sampling = startSampling(31);
  pictures.forEach((p, n) => {
    sampling.push(n, p);
  });
  const plate = plateOf(sampling.frames, [
    { xPx: placed.x, yPx: placed.y, radiusPx: patchPx, picture: pictures[0] },
  ]);
  const learner = plate && startLearner(rest.still(), plate);
  for (let n = movesFrom; n <= extendsAt; n++) {
    learner?.learn(
      pictures[n],
      plate,
      1,
      body.xPx[n] - body.xPx[0] + centreX,
      body.yPx[n] - body.yPx[0] + centreY,
      0,
    );
  }
  learner?.conclude();
  const model = learner?.model() ?? patchModel(pictures[0], centreX, centreY, half);
  const behind = learner ? plate : null;
  const matcher = makeMatcher(half);
  const timesMs: number[] = [];
  for (let call = 0; call < warmCalls + timedCalls; call++) {
    const n = movesFrom + (call % (extendsAt - movesFrom + 1));
    const x = body.xPx[n] - body.xPx[0] + centreX + startPx;
    const y = body.yPx[n] - body.yPx[0] + centreY + startPx;
    const start = performance.now();
    matcher.match(pictures[n], model, x, y, noise, behind, 1);
    if (call >= warmCalls) timesMs.push(performance.now() - start);
  }
  return timesMs.sort((a, b) => a - b)[timesMs.length >> 1];
}
