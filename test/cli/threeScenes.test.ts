import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Result, resultSchema } from '../../analysis/sheet/result.ts';
import type { DropTruth } from '../../fixtures/scene/truth.ts';
import { makeScene } from '../../fixtures/scenes.ts';
import { openLog } from '../../main/log/openLog.ts';
import { type CommandRun, tetherfall } from './commandRun.ts';

// The main job from file to result, as a user does it, held against what really happened in the made drop.
describe.each(['clean', 'noisy', 'coded'])('tetherfall reduce: scene %s', (name) => {
  let folder: string;
  let logPath: string;
  let truth: DropTruth;
  let run: CommandRun;
  let result: Result;

  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'tetherfall-scene-'));
    logPath = join(folder, 'log.sqlite');
    const scene = await makeScene(name, folder);
    truth = scene.truth;
    run = await tetherfall([
      'reduce',
      scene.sheetPath,
      '--out',
      join(folder, 'result.json'),
      '--log',
      logPath,
      '--quiet',
    ]);
    expect(run.stderr).toBe('');
    result = resultSchema.parse(JSON.parse(await readFile(join(folder, 'result.json'), 'utf8')));
  });
  afterAll(() => rm(folder, { recursive: true, force: true, maxRetries: 10 }));

  const keyValue = (quantity: string) => {
    const found = result.keyValues.find((k) => k.quantity === quantity);
    if (!found) throw new Error(`no ${quantity}`);
    return found;
  };
  /** Result and truth of the frames up to extension. */
  const untilExtension = () =>
    result.frames
      .map((frame) => ({ frame, true: truth.frames[frame.n] }))
      .filter((f) => f.true.timeS <= truth.extension.farthest.timeS);

  it('ends well and says where everything is', () => {
    expect(run.status).toBe(0);
    expect(run.stdout).toContain(join(folder, 'result.json'));
    expect(run.stdout).toContain(`reduction 1 in ${logPath}`);
    expect(run.stdout).toMatch(/ball\.g +\(9\.\d+ ± 0\.\d+\) m\/s²/);
  });

  it('gives the extension time within 0.5 %', () => {
    // The sheet states the separation, so extension is the tip's greatest distance from its anchor, in the result as in the truth.
    const { sinceReleaseS } = truth.extension.farthest;
    const { value, u } = keyValue('tip.extensionTime');
    expect(Math.abs(value / sinceReleaseS - 1)).toBeLessThan(0.005);
    expect(Math.abs(value - sinceReleaseS)).toBeLessThan(3 * u);
  });

  it("gives the ball's g within 3 u and within 0.3 %", () => {
    const { value, u } = keyValue('ball.g');
    expect(Math.abs(value - truth.gMps2)).toBeLessThan(3 * u);
    expect(Math.abs(value / truth.gMps2 - 1)).toBeLessThan(0.003);
  });

  it('gives the tip to 0.06 px RMS until extension', () => {
    const errors = untilExtension().flatMap(({ frame, true: { timeS, tip } }) => {
      const { x, y, state } = frame.bodies.tip;
      return state === 'measured' && x !== undefined && y !== undefined
        ? [{ timeS, x: x - tip.x, y: y - tip.y }]
        : [];
    });
    // The tip was placed by hand, half a pixel off its centre: that stays the same and drops out of any motion. The error is
    // what comes on top of it, from the frames at rest on.
    const atRest = errors.filter((e) => e.timeS < truth.releaseTimeS);
    const offset = { x: mean(atRest.map((e) => e.x)), y: mean(atRest.map((e) => e.y)) };
    const rmsPx = Math.sqrt(mean(errors.map((e) => (e.x - offset.x) ** 2 + (e.y - offset.y) ** 2)));
    expect(errors.length).toBeGreaterThan(0.95 * untilExtension().length);
    expect(rmsPx).toBeLessThan(0.06);
  });

  it('loses no frame before extension', () => {
    for (const { frame } of untilExtension()) {
      for (const id of ['tip', 'ball']) expect(frame.bodies[id].state).not.toBe('lost');
    }
    expect(untilExtension()).toHaveLength(
      truth.frames.filter((f) => f.timeS <= truth.extension.farthest.timeS).length,
    );
  });

  it('keeps sheet and result in the log', async () => {
    const log = await openLog(logPath);
    try {
      const saved = await log.get(1);
      expect(saved.result).toEqual(result);
      expect(saved.footageSha256).toBe(result.inputs.footageSha256);
      expect(await log.verify()).toBeNull();
    } finally {
      await log.close();
    }
  });
});

function mean(values: readonly number[]): number {
  return values.reduce((sum, v) => sum + v, 0) / values.length;
}
