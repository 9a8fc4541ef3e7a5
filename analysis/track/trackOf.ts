import type { Sighting } from './follow.ts';
import type { Track } from './track.ts';

/** Packs the sightings of one body, in ascending frame order, into a track. */
export function trackOf(bodyId: string, sightings: readonly Sighting[]): Track {
  return {
    bodyId,
    frame: Int32Array.from(sightings, (s) => s.n),
    xPx: Float64Array.from(sightings, (s) => s.xPx),
    yPx: Float64Array.from(sightings, (s) => s.yPx),
    uXPx: Float64Array.from(sightings, (s) => s.uXPx),
    uYPx: Float64Array.from(sightings, (s) => s.uYPx),
    score: Float64Array.from(sightings, (s) => s.score),
    state: sightings.map((s) => s.state),
  };
}
