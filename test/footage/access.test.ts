import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { encode } from '../../fixtures/encode.ts';
import { BlockCache } from '../../main/footage/blockCache.ts';
import type { FootageBackend } from '../../main/footage/frameSource.ts';
import { backendsHere } from './backendsHere.ts';
import { childrenAlive } from './childrenAlive.ts';
import { lumaDigest } from './lumaDigest.ts';
import { pattern, patterns } from './pattern.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();
const COUNT = 200; // more than three blocks of the cache
const path = () => folder.in('long.mp4');
let backends: FootageBackend[] = [];

beforeAll(async () => {
  backends = await backendsHere();
  // one key frame, and B-frames: the hardest case for access to a frame
  const form = { kind: 'h264', crf: 18, gop: 250, bFrames: 2 } as const;
  await encode(patterns(COUNT, 96, 64), path(), form, { playRateHz: 1000 });
});

const known = new Map<FootageBackend, string[]>();

/** Digests of all frames in order, read once per backend. */
async function forward(backend: FootageBackend): Promise<string[]> {
  const before = known.get(backend);
  if (before !== undefined) return before;
  const source = await backend.open(path());
  const seen: string[] = [];
  for await (const { n, picture } of source.frames(0, COUNT - 1)) {
    expect(n).toBe(seen.length);
    seen.push(lumaDigest(picture));
  }
  await source.close();
  known.set(backend, seen);
  return seen;
}

describe('frame(n)', () => {
  it.each([true, false])(
    'is bit for bit the frame of the forward stream (index known: %s)',
    async (indexed) => {
      for (const backend of backends) {
        const truth = await forward(backend);
        const source = await backend.open(path());
        if (indexed) await source.index();
        const anyFrames = fc.array(fc.nat({ max: COUNT - 1 }), { minLength: 4, maxLength: 6 });
        await fc.assert(
          fc.asyncProperty(anyFrames, async (order) => {
            for (const n of order) expect(lumaDigest(await source.frame(n)), `frame ${n}`).toEqual(truth[n]);
          }),
          { numRuns: 2, seed: 5 },
        );
        await source.close();
        expect(childrenAlive(), backend.name).toBe(0);
      }
    },
  );

  it('steps forwards and back over the borders of blocks', async () => {
    const backend = backends[0] as FootageBackend;
    const truth = await forward(backend);
    const source = await backend.open(path());
    await source.index();
    const there = Array.from({ length: 80 }, (_, i) => i);
    for (const n of [...there, ...there.reverse()])
      expect(lumaDigest(await source.frame(n))).toEqual(truth[n]);
    await source.close();
  });

  it('gives a picture to keep', async () => {
    const source = await (backends[0] as FootageBackend).open(path());
    const kept = await source.frame(3);
    kept.luma.fill(0);
    expect((await source.frame(3)).luma.some((value) => value !== 0)).toBe(true);
    await source.close();
  });

  it('refuses a frame behind the end in one line, and a number that is none as a broken promise', async () => {
    const source = await (backends[0] as FootageBackend).open(path());
    const beyond = {
      code: 'frameBeyondFootage',
      status: 3,
      message: expect.stringMatching(/no frame 900; .*200 frames/),
    };
    await expect(source.frame(900)).rejects.toMatchObject(beyond);
    await source.index();
    await expect(source.frame(900)).rejects.toMatchObject(beyond);
    await expect(source.frame(-1)).rejects.toThrow(RangeError);
    await source.close();
  });
});

describe('frames(first, last)', () => {
  it('gives any range, with and without an index', async () => {
    for (const backend of backends) {
      const truth = await forward(backend);
      const source = await backend.open(path());
      const range = async () => {
        const seen: string[] = [];
        for await (const { picture } of source.frames(140, 150)) seen.push(lumaDigest(picture));
        return seen;
      };
      expect(await range(), backend.name).toEqual(truth.slice(140, 151));
      await source.index();
      expect(await range(), backend.name).toEqual(truth.slice(140, 151));
      await source.close();
    }
  });

  it('refuses a range that goes on behind the end, after the frames that there are', async () => {
    const source = await (backends[0] as FootageBackend).open(path());
    let last = -1;
    const reading = async () => {
      for await (const { n } of source.frames(190, 230)) last = n;
    };
    await expect(reading()).rejects.toMatchObject({ code: 'frameBeyondFootage' });
    expect(last).toBe(COUNT - 1);
    await source.close();
  });
});

describe('BlockCache', () => {
  it('never holds more bytes than allowed and drops the block used longest ago', () => {
    const cache = new BlockCache(3 * 96 * 64);
    for (const block of [1, 2, 3]) cache.put(block, [pattern(block, 96, 64)]);
    cache.get(1);
    cache.put(4, [pattern(4, 96, 64)]);
    expect([1, 2, 3, 4].filter((block) => cache.has(block))).toEqual([1, 3, 4]);
    expect(cache.bytes).toBe(3 * 96 * 64);
  });
});
