import { type Follower, startFollower } from '../../analysis/track/follow.ts';
import { halfOf } from '../../analysis/track/patchModel.ts';
import { plateOf } from '../../analysis/track/plate.ts';
import { startRest } from '../../analysis/track/rest.ts';
import { startSampling } from '../../analysis/track/sampling.ts';
import type { PlacedBody, Sighting } from '../../analysis/track/sighting.ts';
import type { Picture, WideSearch } from '../../analysis/track/track.ts';
import { trackability } from '../../analysis/track/trackability.ts';

/** Follows one body through frames in memory, as the reduce job does with footage. */
export function followFilm(
  frames: readonly Picture[],
  body: Partial<PlacedBody> & { xPx: number; yPx: number; patchPx: number },
  search: WideSearch,
  exposureShare = 0,
): Sighting[] {
  const placed: PlacedBody = { id: 'body', frame: 0, marks: [], uMarkPx: 0.5, ...body };
  const judged = trackability(frames[0], Math.round(body.xPx), Math.round(body.yPx), halfOf(body.patchPx));
  if (!judged.ok) throw new Error(`not trackable: ${judged.reason}`);
  const rest = startRest(frames[0], body.xPx, body.yPx, body.patchPx, judged.noise);
  frames.slice(1).every((f) => rest.push(f));
  const sampling = startSampling(31);
  frames.forEach((f, n) => {
    sampling.push(n, f);
  });
  const plate = plateOf(sampling.frames, [
    { xPx: body.xPx, yPx: body.yPx, radiusPx: body.patchPx, picture: frames[0] },
  ]);
  const follower: Follower = startFollower(placed, {
    first: frames[0],
    still: rest.still(),
    plate,
    search,
    exposureShare,
  });
  frames.forEach((f, n) => {
    follower.push(n, f);
  });
  return follower.finish();
}
