import { beforeAll, describe, expect, it } from 'vitest';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import type { Picture, Track } from '../../analysis/track/track.ts';
import { sheetOf } from '../../fixtures/scene/sheetOf.ts';
import { scenes } from '../../fixtures/scenes.ts';
import { followBodies } from '../../main/jobs/followBodies.ts';
import { loadWideSearch } from '../../main/jobs/wideSearch.ts';
import { memoryFootage } from '../bench/tracking/memoryFootage.ts';
import { openCvPlaces, type Places } from './openCvPlaces.ts';

let tracks: readonly Track[];
let pictures: Picture[];
let starts: { id: string; x: number; y: number; patchPx: number }[];

beforeAll(async () => {
  const clean = scenes.find((s) => s.name === 'clean');
  if (!clean) throw new Error('no scene clean');
  const drop = clean.make();
  const sheet = sheetSchema.parse(sheetOf(drop));
  const extendsAt = drop.truth.frames.findIndex((f) => f.timeS >= drop.truth.extension.farthest.timeS);
  pictures = [...drop.pictures()].slice(0, extendsAt);
  ({ tracks } = await followBodies(
    memoryFootage(pictures),
    sheet,
    await loadWideSearch(),
    undefined,
    () => {},
  ));
  starts = sheet.bodies.map(({ id, x, y, patchPx = 31 }) => ({ id, x, y, patchPx }));
});

/** Mean distance of another method's displacement since the reference frame from the track's, over stretches of the fall. */
function offsets(track: Track, from: number, other: Places): { x: number; y: number; frames: number }[] {
  const stretches = 4;
  const length = Math.ceil(other.length / stretches);
  return Array.from({ length: stretches }, (_, k) => {
    const part = other.slice(k * length, (k + 1) * length);
    const mean = (of: (place: Places[number]) => number) =>
      part.reduce((sum, place) => sum + of(place), 0) / part.length;
    return {
      x: mean((p) => p.dx - (track.xPx[p.n] - track.xPx[from])),
      y: mean((p) => p.dy - (track.yPx[p.n] - track.yPx[from])),
      frames: part.length,
    };
  });
}

describe('track, against a general image library on the same frames', () => {
  // Both methods of the library lock to whole pixels by 0.01 to 0.03 px; over a stretch of frames at all phases that cancels.
  // What is left would be a systematic offset, by convention or by method: at most 0.05 px.
  // The reference is the first frame in which the body has left the rig: what held it would be part of the template otherwise.
  it.each(['tip', 'ball'])('has no systematic offset from template match or optical flow: %s', async (id) => {
    const start = starts.find((s) => s.id === id);
    const track = tracks.find((t) => t.bodyId === id);
    if (!start || !track) throw new Error(`no body ${id}`);
    expect(track.state.filter((s) => s === 'lost')).toEqual([]);
    const from = track.yPx.findIndex((y) => y > start.y + 1.5 * start.patchPx);
    const { templateMatch, opticalFlow } = await openCvPlaces(pictures, {
      n: from,
      x: track.xPx[from],
      y: track.yPx[from],
      patchPx: start.patchPx,
    });
    for (const found of [templateMatch, opticalFlow]) {
      expect(found.length).toBeGreaterThan(100);
      for (const offset of offsets(track, from, found)) {
        expect(offset.frames).toBeGreaterThan(20);
        expect(Math.abs(offset.x)).toBeLessThan(0.05);
        expect(Math.abs(offset.y)).toBeLessThan(0.05);
      }
    }
  });
});
