import type { CameraShift } from './cameraShift.ts';
import type { Sighting } from './sighting.ts';
import type { Track } from './track.ts';

/**
 * Packs the sightings of one body, in ascending frame order, into a track.
 *
 * @param shifts  how far a shaken camera had moved, by frame; none: it stood still
 */
export function trackOf(
  bodyId: string,
  sightings: readonly Sighting[],
  shifts: ReadonlyMap<number, CameraShift | null> = new Map(),
): Track {
  const camera = (pick: (shift: CameraShift) => number) =>
    Float64Array.from(sightings, (s) => {
      const shift = shifts.get(s.n);
      return shift ? pick(shift) : Number.NaN;
    });
  return {
    bodyId,
    frame: Int32Array.from(sightings, (s) => s.n),
    xPx: Float64Array.from(sightings, (s) => s.xPx),
    yPx: Float64Array.from(sightings, (s) => s.yPx),
    uXPx: Float64Array.from(sightings, (s) => s.uXPx),
    uYPx: Float64Array.from(sightings, (s) => s.uYPx),
    score: Float64Array.from(sightings, (s) => s.score),
    state: sightings.map((s) => s.state),
    ...(shifts.size === 0
      ? {}
      : { camera: { xPx: camera((c) => c.xPx), yPx: camera((c) => c.yPx), uPx: camera((c) => c.uPx) } }),
  };
}
