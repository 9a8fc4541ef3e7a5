import { mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { refuseUnwritable, writeResult } from '../../main/cli/resultFile.ts';
import { ballG, reductionExample } from '../log/reductionExample.ts';

let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'tetherfall-result-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));
const { result } = reductionExample({ keyValues: [ballG(9.81, 0.01)] });

describe('writeResult', () => {
  it('writes what it was given, and replaces an older result', async () => {
    const path = join(folder, 'r.json');
    await writeResult(path, reductionExample().result);
    await refuseUnwritable(path);
    await writeResult(path, result);
    expect(JSON.parse(await readFile(path, 'utf8'))).toEqual(result);
    expect(await readdir(folder)).toEqual(['r.json']);
  });

  it('leaves the old result and nothing else when it cannot be put in place', async () => {
    const path = join(folder, 'r.json');
    await mkdir(path); // a folder has come in the way meanwhile: the last step fails
    await expect(writeResult(path, result)).rejects.toMatchObject({ name: 'Refusal', status: 1 });
    expect(await readdir(folder)).toEqual(['r.json']);
  });

  it('writes no number that JSON cannot hold', async () => {
    const broken = reductionExample({ keyValues: [ballG(Number.NaN, 1)] }).result;
    await expect(writeResult(join(folder, 'r.json'), broken)).rejects.toThrow('keyValues[0].value is NaN');
    expect(await readdir(folder)).toEqual([]);
  });
});

describe('refuseUnwritable', () => {
  it('leaves no trace', async () => {
    await refuseUnwritable(join(folder, 'r.json'));
    expect(await readdir(folder)).toEqual([]);
  });

  it.each([
    ['a folder', async (path: string) => void (await mkdir(path)), 'this is a folder'],
    ['a sheet', (path: string) => writeFile(path, '{"schema": "tetherfall/sheet/1"}'), 'not a result'],
    ['an empty file', (path: string) => writeFile(path, ''), 'not a result'],
  ])('leaves %s alone', async (_, make, text) => {
    const path = join(folder, 'x');
    await make(path);
    await expect(refuseUnwritable(path)).rejects.toMatchObject({
      status: 2,
      message: expect.stringContaining(text),
    });
  });

  it('takes a result that was written with indents for the result it is', async () => {
    const path = join(folder, 'r.json');
    await writeFile(path, JSON.stringify(result, null, 2));
    await refuseUnwritable(path);
  });
});
