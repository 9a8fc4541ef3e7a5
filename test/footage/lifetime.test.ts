import { readdir } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { beforeAll, describe, expect, it } from 'vitest';
import { encode } from '../../fixtures/encode.ts';
import type { FootageBackend } from '../../main/footage/frameSource.ts';
import { backendsHere } from './backendsHere.ts';
import { childrenAlive, childrenStarted } from './childrenAlive.ts';
import { pattern, patterns } from './pattern.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();
const path = () => folder.in('long.avi');
const COUNT = 300;
const [WIDTH, HEIGHT] = [640, 480];
let backends: FootageBackend[] = [];

beforeAll(async () => {
  backends = await backendsHere();
  const few = patterns(5, WIDTH, HEIGHT);
  const pictures = Array.from({ length: COUNT }, (_, n) => few[n % few.length] ?? pattern(0, WIDTH, HEIGHT));
  await encode(pictures, path(), { kind: 'mjpeg', quality: 5 }, { playRateHz: 1000 });
});

/** Long enough for a loaded machine, far too short for decoding to the end. */
const PROMPT_MS = 1500;

describe('a cancelled index', () => {
  it('rejects promptly with AbortError, ends the decoder, and can be asked for again', async () => {
    for (const backend of backends) {
      const source = await backend.open(path());
      const controller = new AbortController();
      let abortedAt = 0;
      const indexing = source.index({
        signal: controller.signal,
        onFrame: ({ n }) => {
          if (n !== 5) return;
          abortedAt = performance.now();
          controller.abort();
        },
      });
      await expect(indexing).rejects.toMatchObject({ name: 'AbortError' });
      expect(performance.now() - abortedAt).toBeLessThan(PROMPT_MS);
      const frames: number[] = [];
      const index = await source.index({ onFrame: ({ n }) => frames.push(n) });
      expect(index.frameCount).toBe(COUNT);
      expect(frames).toHaveLength(COUNT);
      expect(await source.index()).toBe(index);
      await source.close();
      expect(childrenAlive(), backend.name).toBe(0);
    }
  });

  it('starts nothing where the signal is aborted before', async () => {
    const source = await (backends[0] as FootageBackend).open(path());
    await expect(source.index({ signal: AbortSignal.abort() })).rejects.toMatchObject({ name: 'AbortError' });
    await expect(source.frame(3, AbortSignal.abort())).rejects.toMatchObject({ name: 'AbortError' });
    await source.close();
    expect(childrenAlive()).toBe(0);
  });
});

describe('frames()', () => {
  it('ends the decoder when the loop is left early or cancelled', async () => {
    for (const backend of backends) {
      const source = await backend.open(path());
      for await (const { n } of source.frames(0, COUNT - 1)) if (n === 3) break;
      const controller = new AbortController();
      const reading = async () => {
        for await (const { n } of source.frames(0, COUNT - 1, controller.signal))
          if (n === 3) controller.abort();
      };
      await expect(reading()).rejects.toMatchObject({ name: 'AbortError' });
      expect(childrenAlive(), backend.name).toBeLessThanOrEqual(1); // node-av keeps one process until close()
      await source.close();
      expect(childrenAlive(), backend.name).toBe(0);
    }
  });

  it('needs no more memory for more frames, even if the reader is slow', async () => {
    const source = await (backends[0] as FootageBackend).open(path());
    let after100 = 0;
    let most = 0;
    for await (const { n } of source.frames(0, COUNT - 1)) {
      if (n % 10 === 0) await new Promise((resolve) => setTimeout(resolve, 2)); // the decoder runs ahead if it can
      if (n === 100) after100 = process.memoryUsage().rss;
      if (n > 100) most = Math.max(most, process.memoryUsage().rss);
    }
    await source.close();
    // 200 frames kept would be 59 MB; what the collector has not yet freed is allowed half of that
    expect((most - after100) / 2 ** 20).toBeLessThan(30);
  });
});

describe('close()', () => {
  it('ends what runs, whatever it is, and leaves no file behind', async () => {
    const ours = async () => (await readdir(tmpdir())).filter((name) => name.startsWith('tetherfall')).sort();
    const before = await ours();
    for (const backend of backends) {
      const source = await backend.open(path());
      const stream = source.frames(0, COUNT - 1)[Symbol.asyncIterator]();
      await stream.next();
      expect(childrenAlive(), backend.name).toBeGreaterThan(0);
      const indexing = source.index();
      const picture = source.frame(200);
      const settled = Promise.allSettled([indexing, picture]);
      await source.close();
      expect((await settled).map(({ status }) => status)).toEqual(['rejected', 'rejected']);
      expect(childrenAlive(), backend.name).toBe(0);
      await source.close(); // a second time is no error
    }
    expect(await ours()).toEqual(before);
    expect(childrenStarted()).toBeGreaterThan(2 * backends.length);
  });
});
