import { createReadStream, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { encode } from '../../fixtures/encode.ts';
import type { FootageEvent } from '../../main/api/footageEvents.ts';
import type { JobEvent } from '../../main/api/jobEvents.ts';
import { openFootage } from '../../main/footage/openFootage.ts';
import { reduceInWorker } from '../../main/jobs/reduceInWorker.ts';
import { allEvents } from './eventLines.ts';
import { appWith, get, post, request, testFolder } from './fakeServices.ts';
import { sheetExample } from './sheetExample.ts';

const size = { widthPx: 48, heightPx: 32 } as const;
const frameCount = 7;

/** Frame n is a ramp of 16-bit values that starts at 1000 n. */
function ramp(n: number): Uint16Array {
  return Uint16Array.from({ length: size.widthPx * size.heightPx }, (_, i) => 1000 * n + 7 * i);
}

async function writtenFootage(folder: string): Promise<string> {
  const path = join(folder, 'ramp.mkv');
  const pictures = Array.from({ length: frameCount }, (_, n) => ({ ...size, bitDepth: 16, luma: ramp(n) }));
  await encode(pictures, path, { kind: 'ffv1' }, { playRateHz: 25 });
  return path;
}

describe('real footage through the API', () => {
  it('is dropped, opened and looked at, value for value', async () => {
    const folder = testFolder();
    const original = await writtenFootage(folder);
    const app = appWith({ openFootage, dataFolder: folder });

    const dropped = await request(app, '/api/footage/dropped?name=ramp.mkv', {
      method: 'POST',
      body: Readable.toWeb(createReadStream(original)) as ReadableStream<Uint8Array>,
      duplex: 'half',
    });
    const { path } = (await dropped.json()) as { path: string };
    const events = await allEvents<FootageEvent>(await post(app, '/api/footage', { path }));
    const opened = events.at(-1);
    if (opened?.event !== 'opened') throw new Error(JSON.stringify(opened));
    expect(opened).toMatchObject({
      name: 'ramp.mkv',
      path,
      frameCount,
      ...size,
      bitDepth: 16,
      codec: 'ffv1',
    });
    expect(opened.timeS).toHaveLength(frameCount);
    // 25 Hz, and Matroska keeps times to 1 ms
    opened.timeS.forEach((timeS, n) => {
      expect(Math.abs((timeS ?? Number.NaN) - n / 25)).toBeLessThanOrEqual(0.0005);
    });
    expect(events.at(-2)).toMatchObject({ event: 'progress', framesDone: frameCount });

    for (const n of [0, 5, 3]) {
      const address = `/api/footage/${opened.footageId}/frames/${n}`;
      const raw = new DataView(await (await get(app, `${address}?as=raw`)).arrayBuffer());
      const values = Uint16Array.from({ length: raw.byteLength / 2 }, (_, i) => raw.getUint16(2 * i, true));
      expect(values).toEqual(ramp(n));
      const shown = new Uint8Array(await (await get(app, address)).arrayBuffer());
      expect(shown).toEqual(Uint8Array.from(ramp(n), (value) => Math.floor(value / 256)));
    }
  });

  it('is refused in one line when it is no footage', async () => {
    const path = join(testFolder(), 'clip.mp4');
    writeFileSync(path, 'This is no video.');
    const events = await allEvents<FootageEvent>(
      await post(appWith({ openFootage }), '/api/footage', { path }),
    );
    expect(events).toEqual([
      { event: 'refused', status: 3, code: expect.any(String), message: expect.stringContaining('clip.mp4') },
    ]);
  });
});

describe('a real reduce job through the API', () => {
  it('passes the worker’s refusal on', async () => {
    const folder = testFolder();
    const app = appWith({ reduceInWorker });
    const answer = await post(app, '/api/jobs', { sheet: sheetExample('missing.mp4'), folder });
    const { jobId } = (await answer.json()) as { jobId: string };
    const events = await allEvents<JobEvent>(await get(app, `/api/jobs/${jobId}/events`));
    expect(events.at(-1)).toMatchObject({
      event: 'refused',
      status: 3,
      message: expect.stringContaining('missing.mp4'),
    });
  });
});
