import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { resultSchema } from '../../analysis/sheet/result.ts';
import { type MadeScene, makeScene } from '../../fixtures/scenes.ts';
import { openFootage } from '../../main/footage/openFootage.ts';
import type { Progress } from '../../main/jobs/progress.ts';
import { readSheet } from '../../main/jobs/readSheet.ts';
import { type ReduceOrder, reduceSheet } from '../../main/jobs/reduce.ts';
import { reduceInWorker } from '../../main/jobs/reduceInWorker.ts';

const folder = mkdtempSync(join(tmpdir(), 'tetherfall-job-'));
let scene: MadeScene;
let order: ReduceOrder;
beforeAll(async () => {
  scene = await makeScene('clean', folder);
  order = await readSheet(scene.sheetPath);
});
afterAll(() => rmSync(folder, { recursive: true, force: true, maxRetries: 10 }));

/** The order with one body moved or changed. */
function withBody(id: string, change: object): ReduceOrder {
  return {
    ...order,
    sheet: { ...order.sheet, bodies: order.sheet.bodies.map((b) => (b.id === id ? { ...b, ...change } : b)) },
  };
}

describe('reduceInWorker', () => {
  it('answers with a result of the contract, and reports every phase on the way', async () => {
    const seen: Progress[] = [];
    const result = await reduceInWorker(order, { onProgress: (p) => seen.push(p) });
    expect(resultSchema.parse(result)).toEqual(result);
    expect(result.inputs.sheetSha256).toBe(order.sheetSha256);
    expect(new Set(seen.map((p) => p.phase))).toEqual(new Set(['index', 'track', 'motion']));
    const quantities = result.keyValues.map((k) => k.quantity);
    for (const wanted of [
      'ball.g',
      'tip.peakAcceleration',
      'tip.peakSpeed',
      'tip.releaseTime',
      'tip.extensionTime',
      'tip.extensionTimeReduced',
      'ball.dropAtExtension',
      'ball.dropAtExtensionReduced',
      'tip.lead',
    ]) {
      expect(quantities).toContain(wanted);
    }
    for (const value of result.keyValues) expect(value.u).toBeGreaterThan(0);
    const peak = result.keyValues.find((k) => k.quantity === 'tip.peakAcceleration');
    expect(peak?.bandwidthHz).toBeGreaterThan(0);
  });

  it('follows bodies placed in a later frame back to the first', async () => {
    // The truth of frame 40 is the maker's; both bodies are then a few millimetres down.
    const { tip, ball } = scene.truth.frames[40];
    const later = withBody('tip', { frame: 40, x: tip.x, y: tip.y });
    const result = await reduceInWorker({
      ...later,
      sheet: {
        ...later.sheet,
        bodies: later.sheet.bodies.map((b) =>
          b.id === 'ball' ? { ...b, frame: 40, x: ball.x, y: ball.y } : b,
        ),
      },
    });
    const first = result.frames[0];
    expect(first.n).toBe(0);
    expect(first.bodies.tip.y).toBeCloseTo(scene.truth.frames[0].tip.y, 1);
    expect(first.bodies.ball.y).toBeCloseTo(scene.truth.frames[0].ball.y, 0);
  });

  it('stops when it is cancelled', async () => {
    const cancel = new AbortController();
    const job = reduceInWorker(order, { signal: cancel.signal, onProgress: () => cancel.abort() });
    await expect(job).rejects.toMatchObject({ name: 'AbortError' });
  });
});

describe('reduceSheet', () => {
  it.each<[string, () => ReduceOrder, string, number]>([
    ['a mark outside the picture', () => withBody('tip', { x: 5000 }), 'markOutside', 2],
    [
      'a body placed on even background',
      () => withBody('tip', { x: 215, y: 200, patchPx: 15 }),
      'bodyFeatureless',
      2,
    ],
    ['a patch larger than the picture', () => withBody('tip', { patchPx: 301 }), 'patchTooLarge', 2],
    [
      'frames that the footage does not have',
      () => ({ ...order, sheet: { ...order.sheet, footage: { ...order.sheet.footage, lastFrame: 9999 } } }),
      'framesMissing',
      2,
    ],
    [
      'times that the footage does not have',
      () => ({ ...order, sheet: { ...order.sheet, clock: { kind: 'timestamps', path: 'none.csv' } } }),
      'timesNotRead',
      2,
    ],
    [
      'footage that is not there',
      () => ({ ...order, sheet: { ...order.sheet, footage: { ...order.sheet.footage, path: 'none.mp4' } } }),
      'footageNotFound',
      3,
    ],
  ])('refuses %s with its own clear line', async (_name, make, code, status) => {
    // In this thread, without the wide search: every one of these is refused before a body has to be searched for.
    const refusal = await reduceSheet(make(), { openFootage, loadSearch: async () => () => null }).then(
      () => null,
      (error: unknown) => error as { code: string; status: number; message: string },
    );
    expect(refusal).toMatchObject({ code, status });
    expect(refusal?.message).not.toContain('\n');
  });
});
