import { createHash } from 'node:crypto';
import { mkdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openFootage } from '../../main/footage/openFootage.ts';
import { greyPng } from './formats.ts';
import { lumaDigest } from './lumaDigest.ts';
import { pattern } from './pattern.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();

async function makeStills(name: string, files: Readonly<Record<string, number>>): Promise<string> {
  await mkdir(folder.in(name));
  for (const [file, n] of Object.entries(files))
    await writeFile(join(folder.in(name), file), greyPng(pattern(n, 48, 32)));
  return folder.in(name);
}

async function read(path: string) {
  const source = await openFootage(path);
  const seen: string[] = [];
  const index = await source.index({ onFrame: ({ picture }) => seen.push(lumaDigest(picture)) });
  await source.close();
  return { index, seen };
}

const lumaOf = (...frames: number[]) => frames.map((n) => lumaDigest(pattern(n, 48, 32)));

describe('numbered stills', () => {
  it('are found by pattern, by folder and by the first of them, in order of number', async () => {
    const there = await makeStills('it’s a drop', { 's_9.png': 0, 's_10.png': 1, 's_11.png': 2 });
    for (const path of [join(there, 's_%d.png'), there, join(there, 's_9.png')]) {
      const { index, seen } = await read(path);
      expect(seen).toEqual(lumaOf(0, 1, 2));
      expect(index.pts).toEqual([null, null, null]);
      expect(index.findings.map(({ code }) => code)).toEqual(['timestampsMissing']);
    }
    expect((await read(join(there, 's_10.png'))).seen).toEqual(lumaOf(1, 2));
  });

  it('are hashed with their names and bytes in order', async () => {
    const there = await makeStills("quote ' in name", { 'b 1.png': 4, 'b 2.png': 5 });
    const hash = createHash('sha256');
    for (const [name, n] of [
      ['b 1.png', 4],
      ['b 2.png', 5],
    ] as const)
      hash.update(`${name}\0`).update(greyPng(pattern(n, 48, 32)));
    expect((await read(there)).index.sha256).toBe(hash.digest('hex'));
  });

  it('with gaps in the numbering are read, with a finding', async () => {
    const { index, seen } = await read(
      await makeStills('gaps', { 's_0001.png': 0, 's_0002.png': 1, 's_0005.png': 2 }),
    );
    expect(seen).toEqual(lumaOf(0, 1, 2));
    expect(index.findings[0]).toMatchObject({
      code: 'stillsMissing',
      text: expect.stringMatching(/1 to 5: 2 of the numbers/),
    });
  });

  it('of several sequences in a folder: the longest, with a finding', async () => {
    const { index, seen } = await read(await makeStills('two', { 'a_1.png': 0, 'b_1.png': 1, 'b_2.png': 2 }));
    expect(seen).toEqual(lumaOf(1, 2));
    expect(index.findings[0]).toMatchObject({
      code: 'severalSequences',
      text: expect.stringMatching(/the longest, b_/),
    });
  });

  it('that are spoilt end the footage before them, with a finding', async () => {
    const there = await makeStills('spoilt', { 's_1.png': 0, 's_2.png': 1, 's_3.png': 2, 's_4.png': 3 });
    const bytes = greyPng(pattern(2, 48, 32));
    bytes[bytes.length >> 1] = (bytes[bytes.length >> 1] ?? 0) ^ 0xff;
    await writeFile(join(there, 's_3.png'), bytes);
    const { index, seen } = await read(there);
    expect(seen.slice(0, index.frameCount)).toEqual(lumaOf(0, 1));
    expect(index.findings[0]).toMatchObject({
      code: 'footageDamaged',
      text: expect.stringMatching(/2 of 4 listed frames/),
    });
  });

  it('of another size end the footage before them, with a finding', async () => {
    const there = await makeStills('sizes', { 's_1.png': 0, 's_2.png': 1 });
    await writeFile(join(there, 's_3.png'), greyPng(pattern(2, 50, 32)));
    const { index } = await read(there);
    expect(index.frameCount).toBe(2);
    expect(index.findings[0]).toMatchObject({
      code: 'footageChanges',
      text: expect.stringMatching(/size changes to 50 × 32 in frame 2/),
    });
  });
});
