import type { WideSearch } from '../../../analysis/track/track.ts';
import { type MovingBody, makeMovingBody } from '../../../fixtures/movingBody.ts';
import { followBodies } from '../../../main/jobs/followBodies.ts';
import { sheetFor } from './madeSubject.ts';
import { memoryFootage } from './memoryFootage.ts';

/** Errors of one made body in each frame in which it was measured [px]. */
export interface MadeErrors {
  readonly frames: readonly number[];
  readonly errorX: readonly number[];
  readonly errorY: readonly number[];
  readonly truth: { readonly xPx: Float64Array; readonly yPx: Float64Array };
  readonly lost: number;
}

/** Films a body into memory and follows it as the program does. */
export async function followMade(body: MovingBody, search: WideSearch): Promise<MadeErrors> {
  const film = makeMovingBody(body);
  const sheet = sheetFor(body, film.truth.xPx[0], film.truth.yPx[0]);
  const { tracks } = await followBodies(memoryFootage(film.frames), sheet, search, undefined, () => {});
  const [track] = tracks;
  const seen = Array.from(track.frame.keys()).filter((i) => track.state[i] === 'measured');
  return {
    frames: seen.map((i) => track.frame[i]),
    errorX: seen.map((i) => track.xPx[i] - film.truth.xPx[track.frame[i]]),
    errorY: seen.map((i) => track.yPx[i] - film.truth.yPx[track.frame[i]]),
    truth: film.truth,
    lost: track.frame.length - seen.length,
  };
}
