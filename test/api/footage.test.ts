import { describe, expect, it, vi } from 'vitest';
import type { FootageEvent } from '../../main/api/footageEvents.ts';
import { Refusal } from '../../main/refusal.ts';
import { allEvents, eventLines } from './eventLines.ts';
import { type FakeFootage, type FakeOptions, fakeFootage } from './fakeFootage.ts';
import { appWith, errorOf, get, post, request } from './fakeServices.ts';

function footageApp(options: FakeOptions = {}) {
  const sources: FakeFootage[] = [];
  const app = appWith({
    openFootage: async (path) => {
      const source = fakeFootage(path, options);
      sources.push(source);
      return source;
    },
  });
  const open = async (path: string) => {
    const last = (await allEvents<FootageEvent>(await post(app, '/api/footage', { path }))).at(-1);
    if (last?.event !== 'opened') throw new Error(`not opened: ${JSON.stringify(last)}`);
    return last;
  };
  return { app, sources, open };
}

describe('POST /api/footage', () => {
  it('says how far it is and then what was opened', async () => {
    const { app } = footageApp({ pts: [0, 512, null, 1536, 2048] });
    const answer = await post(app, '/api/footage', { path: '/rig/clip.mp4' });
    expect(answer.headers.get('content-type')).toBe('application/x-ndjson');
    const events = await allEvents<FootageEvent>(answer);
    expect(events.slice(0, -1).every((e) => e.event === 'progress')).toBe(true);
    expect(events.at(-2)).toMatchObject({ phase: 'index', framesDone: 5, framesTotal: 5 });
    expect(events.at(-1)).toMatchObject({
      event: 'opened',
      path: '/rig/clip.mp4',
      name: 'clip.mp4',
      frameCount: 5,
      widthPx: 4,
      heightPx: 3,
      bitDepth: 8,
      // pts · 1/12800 s: 512 of them are 40 ms; a time that is not in the file is not made up
      timeS: [0, 0.04, null, 0.12, 0.16],
      backend: { name: 'memory', version: '1' },
      findings: [{ code: 'made' }],
    });
  });

  it('passes a refusal on as the last event', async () => {
    const app = appWith({
      openFootage: () =>
        Promise.reject(new Refusal('footageNotFound', 3, '/x.mp4: no such file; check the path.')),
    });
    expect(await allEvents(await post(app, '/api/footage', { path: '/x.mp4' }))).toEqual([
      {
        event: 'refused',
        code: 'footageNotFound',
        status: 3,
        message: '/x.mp4: no such file; check the path.',
      },
    ]);
  });

  it('closes the footage when its index is refused', async () => {
    const { app, sources } = footageApp({
      beforeFrame: () => Promise.reject(new Refusal('damaged', 3, 'No frame can be decoded.')),
    });
    const events = await allEvents<FootageEvent>(await post(app, '/api/footage', { path: '/x.mp4' }));
    expect(events).toMatchObject([{ event: 'refused', code: 'damaged', status: 3 }]);
    expect(sources[0]?.closed).toBe(true);
  });

  it('stops decoding and closes the footage when the client drops the answer', async () => {
    let aborted: () => void = () => {};
    const wasAborted = new Promise<void>((resolve) => {
      aborted = resolve;
    });
    const { app, sources } = footageApp({
      // The second frame never comes: only an abort ends the wait.
      beforeFrame: (n, signal) =>
        n === 0
          ? Promise.resolve()
          : new Promise((_, reject) => {
              signal?.addEventListener('abort', () => {
                aborted();
                reject(signal.reason);
              });
            }),
    });
    const answer = await post(app, '/api/footage', { path: '/x.mp4' });
    for await (const event of eventLines<FootageEvent>(answer)) {
      expect(event).toMatchObject({ event: 'progress', framesDone: 1 });
      break;
    }
    await wasAborted;
    await expect.poll(() => sources[0]?.closed).toBe(true);
  });

  it('refuses a relative path, which would mean something else for each way of starting', async () => {
    const { app } = footageApp();
    expect(await errorOf(await post(app, '/api/footage', { path: 'clip.mp4' }))).toEqual({
      status: 400,
      code: 'requestWrong',
      message: 'Request: path: must be the whole path of the footage.',
    });
  });

  it('keeps at most four open and closes the oldest', async () => {
    const { app, sources, open } = footageApp();
    const first = await open('/1.mp4');
    for (const n of [2, 3, 4]) await open(`/${n}.mp4`);
    expect(sources.map((s) => s.closed)).toEqual([false, false, false, false]);
    await open('/5.mp4');
    expect(sources.map((s) => s.closed)).toEqual([true, false, false, false, false]);
    const error = await errorOf(await get(app, `/api/footage/${first.footageId}/frames/0`));
    expect(error).toMatchObject({ status: 400, code: 'footageNotOpen' });
  });

  it('closes everything with the app', async () => {
    const { app, sources, open } = footageApp();
    await open('/1.mp4');
    await open('/2.mp4');
    await app.close();
    expect(sources.map((s) => s.closed)).toEqual([true, true]);
  });
});

describe('DELETE /api/footage/:id', () => {
  it('closes the footage; again is no error', async () => {
    const { app, sources, open } = footageApp();
    const { footageId } = await open('/1.mp4');
    for (let i = 0; i < 2; i++) {
      const answer = await request(app, `/api/footage/${footageId}`, { method: 'DELETE' });
      expect(answer.status).toBe(204);
    }
    expect(sources[0]?.closed).toBe(true);
  });
});

describe('GET /api/footage/:id/frames/:n', () => {
  it('gives 8-bit luma as it is, for good', async () => {
    const { app, open } = footageApp();
    const { footageId } = await open('/1.mp4');
    const answer = await get(app, `/api/footage/${footageId}/frames/2`);
    expect(Object.fromEntries(answer.headers)).toMatchObject({
      'content-type': 'application/octet-stream',
      'cache-control': 'private, max-age=31536000, immutable',
      'x-width': '4',
      'x-height': '3',
      'x-bit-depth': '8',
      'x-bits-dropped': '0',
    });
    expect([...new Uint8Array(await answer.arrayBuffer())]).toEqual(Array(12).fill(3));
  });

  it('drops the lowest bits of 12-bit luma for display, and says how many', async () => {
    const { app, open } = footageApp({ bitDepth: 12 });
    const { footageId } = await open('/1.mp4');
    const answer = await get(app, `/api/footage/${footageId}/frames/4?as=8`);
    expect(answer.headers.get('x-bits-dropped')).toBe('4');
    expect(answer.headers.get('x-bit-depth')).toBe('12');
    // frame 4 holds 5 · 257 = 1285 = 80 · 16 + 5
    expect([...new Uint8Array(await answer.arrayBuffer())]).toEqual(Array(12).fill(80));
  });

  it('gives the exact values, low byte first, as raw', async () => {
    const { app, open } = footageApp({ bitDepth: 12 });
    const { footageId } = await open('/1.mp4');
    const answer = await get(app, `/api/footage/${footageId}/frames/4?as=raw`);
    expect(answer.headers.get('x-bits-dropped')).toBe('0');
    const bytes = new Uint8Array(await answer.arrayBuffer());
    expect(bytes).toHaveLength(24);
    expect([...bytes.slice(0, 2)]).toEqual([1285 % 256, Math.floor(1285 / 256)]);
  });

  it.each([
    ['5', 'frameUnknown', 'Frame 5 is not in the footage; its last frame is 4.'],
    ['-1', 'requestWrong', 'Request: n: must be a frame number.'],
    ['1.5', 'requestWrong', 'Request: n: must be a frame number.'],
  ])('refuses frame %s', async (n, code, message) => {
    const { app, open } = footageApp();
    const { footageId } = await open('/1.mp4');
    const error = await errorOf(await get(app, `/api/footage/${footageId}/frames/${n}`));
    expect(error).toEqual({ status: 400, code, message });
  });

  it('says that the footage was closed when that happens while a frame is on its way', async () => {
    let fail: ((error: Error) => void) | null = null;
    const beforeSingleFrame = () =>
      new Promise<void>((_, reject) => {
        fail = reject;
      });
    const { app, open } = footageApp({ beforeSingleFrame });
    const { footageId } = await open('/1.mp4');
    const answer = get(app, `/api/footage/${footageId}/frames/0`);
    const end = await vi.waitUntil(() => fail); // the frame is on its way
    await request(app, `/api/footage/${footageId}`, { method: 'DELETE' });
    end(new Error('the decoder was ended'));
    expect(await errorOf(await answer)).toMatchObject({ status: 400, code: 'footageNotOpen' });
  });
});
