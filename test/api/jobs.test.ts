import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it, vi } from 'vitest';
import { canonicalJson } from '../../main/api/canonicalJson.ts';
import type { JobEvent } from '../../main/api/jobEvents.ts';
import type { RunReduceJob } from '../../main/api/services.ts';
import { Refusal } from '../../main/refusal.ts';
import { allEvents, eventLines } from './eventLines.ts';
import { appWith, errorOf, get, post } from './fakeServices.ts';
import { resultExample } from './resultExample.ts';
import { sheetExample } from './sheetExample.ts';

const progress = { phase: 'track', framesDone: 3, framesTotal: 9, rateHz: 30, timeLeftS: 0.2 } as const;

/** Reduce jobs that end when the test says so. */
function heldJobs() {
  const held: { resolve: () => void; reject: (error: Error) => void; order: Parameters<RunReduceJob>[0] }[] =
    [];
  const reduceInWorker: RunReduceJob = (order, { signal, onProgress }) =>
    new Promise((resolve, reject) => {
      onProgress?.(progress);
      signal?.addEventListener('abort', () => reject(new DOMException('cancelled', 'AbortError')));
      held.push({ order, reject, resolve: () => resolve(resultExample(order.sheetSha256)) });
    });
  const app = appWith({ reduceInWorker });
  const start = async (sheet: unknown = sheetExample(), folder: string | null = '/rig') => {
    const answer = await post(app, '/api/jobs', { sheet, folder });
    return ((await answer.json()) as { jobId: string }).jobId;
  };
  const events = (id: string) => get(app, `/api/jobs/${id}/events`);
  const started = (n: number) => expect.poll(() => held.length).toBe(n);
  return { app, held, start, events, started };
}

describe('reduce jobs', () => {
  it('tell how far they are, then the result, and nothing after it', async () => {
    const { held, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    const answer = await events(id);
    held[0]?.resolve();
    const all = await allEvents<JobEvent>(answer);
    expect(all.map((e) => e.event)).toEqual(['progress', 'done']);
    expect(all[0]).toEqual({ event: 'progress', ...progress });
    expect(all[1]).toMatchObject({ result: { schema: 'tetherfall/result/1' } });
  });

  it('tell a late listener at once how they ended', async () => {
    const { held, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    held[0]?.resolve();
    await allEvents(await events(id));
    expect((await allEvents<JobEvent>(await events(id))).map((e) => e.event)).toEqual(['done']);
  });

  it('go on when a listener leaves', async () => {
    const { held, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    for await (const event of eventLines<JobEvent>(await events(id))) {
      expect(event.event).toBe('progress');
      break;
    }
    const answer = await events(id);
    held[0]?.resolve();
    expect((await allEvents<JobEvent>(answer)).at(-1)?.event).toBe('done');
  });

  it('run one after the other', async () => {
    const { held, start, events, started } = heldJobs();
    const first = await start();
    const second = await start();
    await started(1);
    const waiting = eventLines<JobEvent>(await events(second));
    expect((await waiting.next()).value).toEqual({ event: 'queued' });
    held[0]?.resolve();
    await allEvents(await events(first));
    expect((await waiting.next()).value).toMatchObject({ event: 'progress' });
    await started(2);
    held[1]?.resolve();
    expect((await waiting.next()).value).toMatchObject({ event: 'done' });
  });

  it('end when cancelled; one that waited never starts', async () => {
    const { app, held, start, events, started } = heldJobs();
    const [first, second] = [await start(), await start()];
    await started(1);
    for (const id of [second, first])
      expect((await post(app, `/api/jobs/${id}/cancel`, {})).status).toBe(204);
    for (const id of [first, second])
      expect((await allEvents<JobEvent>(await events(id))).at(-1)).toEqual({ event: 'cancelled' });
    const third = await start();
    await started(2);
    held[1]?.resolve();
    expect((await allEvents<JobEvent>(await events(third))).at(-1)?.event).toBe('done');
    expect(held).toHaveLength(2);
  });

  it('stay done when cancelled afterwards', async () => {
    const { app, held, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    held[0]?.resolve();
    await allEvents(await events(id));
    await post(app, `/api/jobs/${id}/cancel`, {});
    expect((await allEvents<JobEvent>(await events(id))).map((e) => e.event)).toEqual(['done']);
  });

  it('pass a refusal on', async () => {
    const { held, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    held[0]?.reject(new Refusal('noKeyValue', 4, 'No key value can be given. The tip was lost.'));
    expect((await allEvents<JobEvent>(await events(id))).at(-1)).toEqual({
      event: 'refused',
      code: 'noKeyValue',
      status: 4,
      message: 'No key value can be given. The tip was lost.',
    });
  });

  it('call a defect by its name, and the next job runs', async () => {
    const log = vi.spyOn(console, 'error').mockImplementation(() => {});
    const { held, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    held[0]?.reject(new Error('worker fell over'));
    expect((await allEvents<JobEvent>(await events(id))).at(-1)).toMatchObject({
      event: 'refused',
      status: 1,
    });
    expect(log).toHaveBeenCalledOnce();
    log.mockRestore();
    await start();
    await started(2);
  });

  it('are cancelled with the app', async () => {
    const { app, start, events, started } = heldJobs();
    const id = await start();
    await started(1);
    const answer = await events(id);
    await app.close();
    expect((await allEvents<JobEvent>(answer)).at(-1)).toEqual({ event: 'cancelled' });
  });

  it('are forgotten after eight newer ones have ended', async () => {
    const { app, held, start, events, started } = heldJobs();
    const ids: string[] = [];
    for (let n = 0; n < 9; n++) {
      const id = await start();
      ids.push(id);
      await started(n + 1);
      held[n]?.resolve();
      await allEvents(await events(id));
    }
    await expect
      .poll(async () => (await errorOf(await get(app, `/api/jobs/${ids[0]}/events`))).code)
      .toBe('jobUnknown');
    expect((await events(ids[1] ?? '')).status).toBe(200);
  });
});

describe('POST /api/jobs', () => {
  it('names the sheet by the SHA-256 of its canonical text, however it was written', async () => {
    const { held, start, started } = heldJobs();
    const sheet = sheetExample();
    await start(sheet);
    await start(Object.fromEntries(Object.entries(sheet).reverse()));
    await started(1);
    held[0]?.resolve();
    await started(2);
    const order = held[0]?.order;
    expect(order?.folder).toBe('/rig');
    expect(order?.sheetSha256).toBe(createHash('sha256').update(canonicalJson(order?.sheet)).digest('hex'));
    expect(held[1]?.order.sheetSha256).toBe(order?.sheetSha256);
  });

  it('refuses a sheet that is not in order', async () => {
    const { app } = heldJobs();
    const answer = await post(app, '/api/jobs', { sheet: { ...sheetExample(), bodies: [] }, folder: '/rig' });
    expect(await errorOf(answer)).toMatchObject({ status: 400, code: 'sheetWrong' });
  });

  it('refuses a relative path in a sheet that was never saved', async () => {
    const { app, start, started } = heldJobs();
    const error = await errorOf(await post(app, '/api/jobs', { sheet: sheetExample(), folder: null }));
    expect(error).toMatchObject({ status: 400, code: 'pathRelative' });
    expect(error.message).toContain('clip.mp4');
    await start(sheetExample('/rig/clip.mp4'), null);
    await started(1);
  });
});

describe('canonicalJson', () => {
  it('gives the example of RFC 8785, section 3.2.3', () => {
    const document = JSON.parse(`{
      "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
      "string": "\\u20ac$\\u000F\\u000aA'\\u0042\\u0022\\u005c\\\\\\"\\/",
      "literals": [null, true, false]
    }`);
    expect(canonicalJson(document)).toBe(
      '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],' +
        '"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}',
    );
  });

  it('sorts names as RFC 8785, section 3.2.3 does: by UTF-16 code units', () => {
    const names = ['\u20ac', '\r', '\ufb33', '1', '\ud83d\ude00', '\u0080', '\u00f6'];
    const text = canonicalJson(Object.fromEntries(names.map((name) => [name, 0])));
    expect(Object.keys(JSON.parse(text))).toEqual([
      '1',
      '\r',
      '\u0080',
      '\u00f6',
      '\u20ac',
      '\ud83d\ude00',
      '\ufb33',
    ]);
    expect(text.startsWith('{"\\r":0,"1":0,')).toBe(true);
  });

  it('reads back as the same document, whatever the order of its fields', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        const same = JSON.parse(JSON.stringify(value));
        expect(JSON.parse(canonicalJson(value))).toEqual(same);
        expect(canonicalJson(reversed(same))).toBe(canonicalJson(value));
      }),
    );
  });
});

function reversed(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(reversed);
  if (typeof value !== 'object' || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .reverse()
      .map(([name, v]) => [name, reversed(v)]),
  );
}
