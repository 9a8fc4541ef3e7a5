import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { readForceRecord } from '../../main/jobs/readForceRecord.ts';

const folder = mkdtempSync(join(tmpdir(), 'tetherfall-force-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function file(text: string): string {
  const path = join(folder, 'cell.csv');
  writeFileSync(path, text);
  return path;
}

describe('readForceRecord', () => {
  it('reads time and force', async () => {
    const rows = Array.from({ length: 20 }, (_, i) => `${i / 1000},${2 * i}`);
    const { timeS, forceN } = await readForceRecord(file(`timeS,forceN\r\n${rows.join('\r\n')}\r\n`));
    expect(timeS[19]).toBe(0.019);
    expect(forceN[19]).toBe(38);
  });

  it('refuses a record that is not one, and names file and line', async () => {
    await expect(readForceRecord(file('timeS,forceN\n0,1\n0.001,pull\n'))).rejects.toMatchObject({
      status: 2,
      code: 'forceWrong',
      message: expect.stringMatching(/^loadCell\.path: .*cell\.csv: line 3 is no time in s and force in N/),
    });
  });

  it('refuses a record that is not there', async () => {
    await expect(readForceRecord(join(folder, 'none.csv'))).rejects.toMatchObject({
      status: 2,
      code: 'forceNotRead',
      message: expect.stringMatching(/check the path/),
    });
  });
});
