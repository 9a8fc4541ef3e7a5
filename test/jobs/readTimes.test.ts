import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { readTimes } from '../../main/jobs/readTimes.ts';

const folder = mkdtempSync(join(tmpdir(), 'tetherfall-times-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function file(text: string): string {
  const path = join(folder, 'times.csv');
  writeFileSync(path, text);
  return path;
}

describe('readTimes', () => {
  it('reads one time per line, with or without a heading, from the last column', async () => {
    expect([...(await readTimes(file('0\n0.001\n0.002\n')))]).toEqual([0, 0.001, 0.002]);
    expect([...(await readTimes(file('frame,timeS\r\n0,0\r\n1,0.004\r\n')))]).toEqual([0, 0.004]);
  });

  it('names the line that holds no time', async () => {
    await expect(readTimes(file('0\n0.001\nlate\n'))).rejects.toThrow('line 3');
  });

  it('refuses an empty list and one that is not there', async () => {
    await expect(readTimes(file(''))).rejects.toMatchObject({ status: 2, code: 'timesWrong' });
    await expect(readTimes(join(folder, 'none.csv'))).rejects.toMatchObject({
      status: 2,
      code: 'timesNotRead',
    });
  });
});
