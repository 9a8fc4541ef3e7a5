import { describe, expect, it } from 'vitest';
import { bridgeGaps } from '../../analysis/track/bridge.ts';
import { doubledFrames, withoutFrames } from '../../analysis/track/doubledFrames.ts';
import type { Sighting } from '../../analysis/track/sighting.ts';

const seen = (n: number, yPx: number): Sighting => ({
  n,
  state: 'measured',
  xPx: 10,
  yPx,
  uXPx: 0.01,
  uYPx: 0.01,
  score: 1,
});
/** Falls by two pixels a frame; frame 6 shows frame 5 again. */
const sightings = Array.from({ length: 12 }, (_, n) => seen(n, n === 6 ? 10 : 2 * n));
const hashes = sightings.map((s) => (s.n === 6 ? 'h5' : `h${s.n}`));

describe('doubledFrames', () => {
  it('names a frame that copies the one before while a body moves', () => {
    expect(doubledFrames([sightings], hashes)).toEqual([6]);
  });

  it('does not take equal pictures of a body at rest for copies', () => {
    const resting = sightings.map((s) => ({ ...s, yPx: 5 }));
    expect(
      doubledFrames(
        [resting],
        hashes.map(() => 'same'),
      ),
    ).toEqual([]);
  });
});

describe('withoutFrames', () => {
  it('leaves a gap that is bridged, not used as data', () => {
    const bridged = bridgeGaps(withoutFrames(sightings, [6]));
    expect(bridged[6].state).toBe('bridged');
    expect(bridged[6].yPx).toBeCloseTo(12, 6);
  });
});
