import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { stat } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { byHand, logFolder } from './logFolder.ts';
import { reductionExample } from './reductionExample.ts';

const folder = logFolder();

function processOf(script: string, ...args: string[]): ChildProcess {
  const file = fileURLToPath(new URL(script, import.meta.url));
  return spawn(process.execPath, ['--import', 'tsx', file, ...args], {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
}

describe('two processes on one log', () => {
  it('make it together and save at once, without losing or mixing up a row', async () => {
    const path = await folder.path();
    const each = 60;
    const writers = ['left', 'right'].map((name) => processOf('./saveMany.ts', path, name, String(each)));
    const ends = await Promise.all(writers.map((w) => once(w, 'exit')));
    expect(ends.map(([code]) => code)).toEqual([0, 0]);
    const log = await folder.open(path);
    expect(await log.verify()).toBeNull();
    const paths = (await log.list()).map((r) => r.footagePath).reverse();
    expect(paths).toHaveLength(2 * each);
    for (const name of ['left', 'right']) {
      const own = paths.filter((p) => p.startsWith(`/${name}/`));
      expect(own).toEqual(Array.from({ length: each }, (_, n) => `/${name}/${n}.mp4`));
    }
  });
});

describe('a process killed in the middle of a transaction', () => {
  it('leaves the log as it was before, and usable', async () => {
    const log = await folder.open();
    await log.save(reductionExample());
    const before = await log.list();
    const writer = processOf('./stopInTransaction.ts', log.path);
    await once(writer.stdout as NodeJS.ReadableStream, 'data');
    const { size } = await stat(`${log.path}-wal`);
    expect(size).toBeGreaterThan(10e6); // or the test would show nothing
    writer.kill('SIGKILL');
    await once(writer, 'exit');

    expect(await log.list()).toEqual(before);
    expect((await log.save(reductionExample())).id).toBe(2);
    expect(await log.verify()).toBeNull();
    await expect(byHand(log.path, 'SELECT * FROM unfinished')).rejects.toThrow('no such table');
  });
});
