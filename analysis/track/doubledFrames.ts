import type { Sighting } from './sighting.ts';

/** A body that goes less than this from frame to frame may look the same in two frames without one being a copy [px]. */
const leastStepPx = 0.3;

/**
 * Frames that are a copy of the one before: their pictures are equal although a body was moving. A camera or a converter that
 * could not keep up writes such frames; the body was elsewhere when they were due.
 *
 * @param bodies   sightings of each body, ascending, all over the same frames or fewer
 * @param hashes   hash of every frame of the footage
 */
export function doubledFrames(bodies: readonly (readonly Sighting[])[], hashes: readonly string[]): number[] {
  const doubled = new Set<number>();
  for (const sightings of bodies) {
    for (let i = 2; i < sightings.length - 1; i++) {
      const { n } = sightings[i];
      if (hashes[n] !== hashes[n - 1]) continue;
      const before = sightings[i - 2];
      const after = sightings[i + 1];
      const wayPx = Math.hypot(after.xPx - before.xPx, after.yPx - before.yPx);
      if (wayPx / (after.n - before.n) > leastStepPx) doubled.add(n);
    }
  }
  return [...doubled].sort((a, b) => a - b);
}

/** Takes what was seen in those frames out, so that it is not used as data. */
export function withoutFrames(sightings: readonly Sighting[], frames: readonly number[]): Sighting[] {
  return sightings.map((s) =>
    frames.includes(s.n)
      ? {
          n: s.n,
          state: 'lost',
          xPx: Number.NaN,
          yPx: Number.NaN,
          uXPx: Number.NaN,
          uYPx: Number.NaN,
          score: Number.NaN,
        }
      : s,
  );
}
