import { createHash } from 'node:crypto';
import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { basename, dirname, join, resolve } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { safeFileName } from '../../main/api/fileNames.ts';
import { appWith, errorOf, request, testFolder } from './fakeServices.ts';

function droppedApp() {
  const dataFolder = testFolder();
  const app = appWith({ dataFolder });
  const drop = (name: string, body: BodyInit, headers: Record<string, string> = {}) =>
    request(app, `/api/footage/dropped?name=${encodeURIComponent(name)}`, {
      method: 'POST',
      body,
      headers,
      duplex: 'half',
    });
  const pathOf = async (answer: Response) => ((await answer.json()) as { path: string }).path;
  return { dropped: join(dataFolder, 'dropped'), drop, pathOf };
}

function inPieces(...pieces: string[]): ReadableStream<Uint8Array> {
  return new ReadableStream({
    start(controller) {
      for (const piece of pieces) controller.enqueue(new TextEncoder().encode(piece));
      controller.close();
    },
  });
}

describe('POST /api/footage/dropped', () => {
  it('keeps a copy, as it comes in pieces, under a folder named after its content', async () => {
    const { drop, pathOf, dropped } = droppedApp();
    const path = await pathOf(await drop('drop 7.mp4', inPieces('one', 'two')));
    const sha256 = createHash('sha256').update('onetwo').digest('hex');
    expect(path).toBe(join(dropped, sha256.slice(0, 16), 'drop 7.mp4'));
    expect(readFileSync(path, 'utf8')).toBe('onetwo');
    expect(readdirSync(dropped)).toHaveLength(1);
  });

  it('keeps the same file once, and never overwrites', async () => {
    const { drop, pathOf, dropped } = droppedApp();
    const first = await pathOf(await drop('a.mp4', 'same'));
    expect(await pathOf(await drop('a.mp4', 'same'))).toBe(first);
    expect(readdirSync(dropped)).toHaveLength(1);

    writeFileSync(first, 'changed since');
    const second = await pathOf(await drop('a.mp4', 'same'));
    expect(second).not.toBe(first);
    expect(readFileSync(first, 'utf8')).toBe('changed since');
    expect(readFileSync(second, 'utf8')).toBe('same');
  });

  it('keeps two that come at the same time apart', async () => {
    const { drop, pathOf } = droppedApp();
    const bodies = ['x', 'y', 'z'];
    const answers = await Promise.all(bodies.map((body) => drop('a.mp4', body)));
    const paths = await Promise.all(answers.map(pathOf));
    expect(paths.map((path) => readFileSync(path, 'utf8'))).toEqual(bodies);
  });

  it('refuses an empty file and leaves nothing behind', async () => {
    const { drop, dropped } = droppedApp();
    expect(await errorOf(await drop('a.mp4', inPieces()))).toMatchObject({ status: 400, code: 'fileEmpty' });
    expect(readdirSync(dropped)).toEqual([]);
  });

  it('refuses a file for which the disk has no room, before it is sent', async () => {
    const { drop, dropped } = droppedApp();
    const answer = await drop('a.mp4', 'x', { 'content-length': '9000000000000000' });
    expect(await errorOf(answer)).toMatchObject({ status: 400, code: 'diskFull' });
    expect(readdirSync(dropped)).toEqual([]);
  });

  it('leaves nothing behind when the sender breaks off', async () => {
    const { drop, dropped } = droppedApp();
    let pieces = 0;
    const brokenOff = new ReadableStream<Uint8Array>({
      pull(controller) {
        pieces += 1;
        if (pieces < 4) controller.enqueue(new Uint8Array(1000));
        else controller.error(new Error('the sender went away'));
      },
    });
    expect(await errorOf(await drop('a.mp4', brokenOff))).toMatchObject({ status: 400, code: 'dropBroken' });
    expect(readdirSync(dropped)).toEqual([]);
  });
});

describe('safeFileName', () => {
  it.each([
    ['clip.mp4', 'clip.mp4'],
    ['../../etc/passwd', 'passwd'],
    ['C:\\rig\\drop 12.avi', 'drop 12.avi'],
    ['.hidden.mov', 'hidden.mov'],
    ['nul.mp4', '_nul.mp4'],
    ['a<b>:c?.mkv', 'a_b__c_.mkv'],
    ['..', 'footage'],
    ['Fallprüfung №3.mp4', 'Fallprüfung №3.mp4'],
  ])('%s becomes %s', (name, safe) => {
    expect(safeFileName(name)).toBe(safe);
  });

  it('is always one visible file of the folder it is put into, and stays what it is', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string({ unit: 'binary' }), fc.string({ unit: 'grapheme' })), (name) => {
        const safe = safeFileName(name);
        const path = resolve('/data/dropped', safe);
        expect(dirname(path)).toBe(resolve('/data/dropped'));
        expect(basename(path)).toBe(safe);
        expect(safe).not.toMatch(/^\.|[\\/:*?"<>|]|[. ]$/);
        expect(safeFileName(safe)).toBe(safe);
      }),
      { numRuns: 500 },
    );
  });
});
