import { spawnSync } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { encode } from '../../fixtures/encode.ts';
import { backends } from '../../main/footage/backends/all.ts';
import type { FrameSource } from '../../main/footage/frameSource.ts';
import { pattern } from '../footage/pattern.ts';

/**
 * How fast footage is read: 600 frames of 1280 × 800 H.264, against `ffmpeg -f null -` on the same file in the same run. Each figure is
 * the median of three, taken in turn. Run with `npx tsx test/bench/footage.ts`.
 */
const [WIDTH, HEIGHT, COUNT, REPEATS] = [1280, 800, 600, 3];

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1] ?? Number.NaN;
}

async function secondsOf(work: () => unknown): Promise<number> {
  const start = performance.now();
  await work();
  return (performance.now() - start) / 1000;
}

async function stepTimes(source: FrameSource, frames: readonly number[]): Promise<string> {
  const timesMs: number[] = [];
  for (const n of frames) timesMs.push(1000 * (await secondsOf(() => source.frame(n))));
  timesMs.sort((a, b) => a - b);
  const at = (part: number) => (timesMs[Math.floor(part * (timesMs.length - 1))] ?? Number.NaN).toFixed(1);
  return `median ${at(0.5)} ms, 95 % ${at(0.95)} ms, longest ${at(1)} ms`;
}

const folder = await mkdtemp(join(tmpdir(), 'tetherfall-bench-'));
try {
  const path = join(folder, 'clip.mp4');
  const few = Array.from({ length: 12 }, (_, n) => pattern(n, WIDTH, HEIGHT));
  const pictures = Array.from({ length: COUNT }, (_, n) => few[n % few.length] ?? pattern(n, WIDTH, HEIGHT));
  await encode(pictures, path, { kind: 'h264', crf: 23, bFrames: 2, gop: 250 }, { playRateHz: 1000 });
  const null3 = () => spawnSync('ffmpeg', ['-v', 'error', '-i', path, '-f', 'null', '-']).status;

  for (const backend of backends) {
    const version = await backend.probe();
    if (version === null) continue;
    const spent = { null: [] as number[], index: [] as number[], frames: [] as number[] };
    for (let i = 0; i < REPEATS; i++) {
      const source = await backend.open(path);
      spent.null.push(await secondsOf(null3));
      spent.index.push(await secondsOf(() => source.index()));
      await source.close();
      const again = await backend.open(path);
      spent.frames.push(
        await secondsOf(async () => {
          for await (const { n } of again.frames(0, COUNT - 1)) if (n >= COUNT) throw new Error('too many');
        }),
      );
      await again.close();
    }
    const of = (name: 'index' | 'frames') =>
      `${(COUNT / median(spent[name])).toFixed(0)} frames/s (time × ${(median(spent[name]) / median(spent.null)).toFixed(2)})`;
    console.log(`${backend.name} ${version}`);
    console.log(`  ffmpeg -f null: ${(COUNT / median(spent.null)).toFixed(0)} frames/s`);
    console.log(`  index(): ${of('index')}; frames(): ${of('frames')}`);

    const source = await backend.open(path);
    await source.index();
    const forwards = Array.from({ length: 200 }, (_, i) => 300 + i);
    console.log(`  frame(n) stepping forwards: ${await stepTimes(source, forwards)}`);
    console.log(`  frame(n) stepping back: ${await stepTimes(source, [...forwards].reverse())}`);
    const anywhere = Array.from({ length: 20 }, (_, i) => (i * 379) % COUNT);
    console.log(`  frame(n) anywhere: ${await stepTimes(source, anywhere)}`);
    await source.close();
  }
} finally {
  await rm(folder, { recursive: true, force: true, maxRetries: 10 });
}
