import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import type { Sheet, SheetInput } from '../../analysis/sheet/sheet.ts';
import { sheetForFolder } from '../../main/api/sheetPaths.ts';
import { appWith, errorOf, post, testFolder } from './fakeServices.ts';
import { sheetExample } from './sheetExample.ts';

function parsed(input: SheetInput): Sheet {
  const answer = parseSheet(input);
  if (!answer.ok) throw new Error(answer.problems.join());
  return answer.sheet;
}

describe('POST /api/sheets/parse', () => {
  const parse = async (json: unknown) => (await post(appWith({}), '/api/sheets/parse', { json })).json();

  it('has nothing to say about a sheet in order', async () => {
    expect(await parse(sheetExample())).toMatchObject({ problems: [], findings: [] });
  });

  it('gives one line for each problem', async () => {
    const sheet = { ...sheetExample(), clock: { kind: 'captureRate', captureRateHz: 0 }, bodies: [] };
    const { problems } = (await parse(sheet)) as { problems: string[] };
    expect(problems).toHaveLength(2);
    expect(problems[0]).toMatch(/^clock\.captureRateHz: /);
  });

  it('gives what is inconsistent as findings', async () => {
    const sheet = { ...sheetExample(), footage: { path: 'a.mp4', firstFrame: 9, lastFrame: 3 } };
    const { findings } = (await parse(sheet)) as { findings: { code: string; level: string }[] };
    expect(findings).toContainEqual(expect.objectContaining({ code: 'framesReversed', level: 'stop' }));
  });
});

describe('POST /api/sheets/open', () => {
  it('opens a sheet and says what its paths are relative to', async () => {
    const folder = testFolder();
    const path = join(folder, 'drop.json');
    writeFileSync(path, JSON.stringify({ ...sheetExample(), operator: 'unknown field' }));
    const answer = await (await post(appWith({}), '/api/sheets/open', { path })).json();
    expect(answer).toMatchObject({
      path,
      folder,
      sheet: { footage: { path: 'clip.mp4', firstFrame: 0 } },
      findings: [{ code: 'fieldNotKnown' }],
    });
  });

  it('refuses what is not a sheet, with its path', async () => {
    const path = join(testFolder(), 'drop.json');
    writeFileSync(path, 'not json');
    const error = await errorOf(await post(appWith({}), '/api/sheets/open', { path }));
    expect(error.status).toBe(400);
    expect(error.message).toContain(path);
  });
});

describe('POST /api/sheets/save', () => {
  const save = (path: string, sheet: unknown, folder: string | null) =>
    post(appWith({}), '/api/sheets/save', { path, sheet, folder });

  it('writes a sheet that opens again as the same sheet', async () => {
    const folder = testFolder();
    const path = join(folder, 'drop.json');
    expect((await save(path, sheetExample(), folder)).status).toBe(200);
    expect(JSON.parse(readFileSync(path, 'utf8'))).toEqual(parsed(sheetExample()));
    const opened = await (await post(appWith({}), '/api/sheets/open', { path })).json();
    expect(opened).toMatchObject({ sheet: parsed(sheetExample()) });
    expect(readdirSync(folder)).toEqual(['drop.json']);
  });

  it('refuses a sheet that is not in order and leaves the old one as it was', async () => {
    const folder = testFolder();
    const path = join(folder, 'drop.json');
    writeFileSync(path, 'the old one');
    const error = await errorOf(await save(path, { ...sheetExample(), bodies: [] }, folder));
    expect(error).toMatchObject({ status: 400, code: 'sheetWrong' });
    expect(error.message).toMatch(/^The sheet was not saved: bodies: /);
    expect(readFileSync(path, 'utf8')).toBe('the old one');
    expect(readdirSync(folder)).toEqual(['drop.json']);
  });

  it.each([
    ['in a folder that is missing', 'missing/drop.json', /there is no folder/],
    ['below a file', 'a.txt/drop.json', /there is no folder/],
    ['as a folder', 'sub', /is a folder/],
  ])('refuses to save %s and leaves nothing behind', async (_, name, message) => {
    const folder = testFolder();
    mkdirSync(join(folder, 'sub'));
    writeFileSync(join(folder, 'a.txt'), '');
    const error = await errorOf(await save(join(folder, name), sheetExample(), folder));
    expect(error).toMatchObject({ status: 400, code: 'sheetNotSaved' });
    expect(error.message).toMatch(message);
    expect(readdirSync(folder)).toEqual(['a.txt', 'sub']);
  });

  it('keeps the way to the footage when a sheet is saved elsewhere', async () => {
    const folder = testFolder();
    mkdirSync(join(folder, 'sheets'));
    const path = join(folder, 'sheets', 'drop.json');
    const answer = (await (await save(path, sheetExample('footage/clip.mp4'), folder)).json()) as {
      sheet: Sheet;
    };
    expect(answer.sheet.footage.path).toBe('../footage/clip.mp4');
    expect(JSON.parse(readFileSync(path, 'utf8')).footage.path).toBe('../footage/clip.mp4');
  });
});

describe('sheetForFolder', () => {
  const moved = (path: string, from: string | null, to: string) =>
    sheetForFolder(parsed(sheetExample(path)), from, to).footage.path;

  it('leaves a sheet that stays in its folder as the technician wrote it', () => {
    expect(moved('../x/./clip.mp4', '/rig/sheets', '/rig/sheets/')).toBe('../x/./clip.mp4');
  });

  it('makes an absolute path relative only where footage and sheet would move together', () => {
    expect(moved('/rig/drops/a/clip.mp4', null, '/rig/drops')).toBe('a/clip.mp4');
    expect(moved('/elsewhere/clip.mp4', null, '/rig/drops')).toBe('/elsewhere/clip.mp4');
    expect(moved('/rig/drops2/clip.mp4', null, '/rig/drops')).toBe('/rig/drops2/clip.mp4');
  });

  it('moves the list of times with the footage', () => {
    const sheet = parsed({ ...sheetExample(), clock: { kind: 'timestamps', path: 'times.csv' } });
    expect(sheetForFolder(sheet, '/rig', '/rig/new').clock).toEqual({
      kind: 'timestamps',
      path: '../times.csv',
    });
  });

  it('there and back again means the same file', () => {
    const part = fc.stringMatching(/^[a-z0-9 _-]{1,8}$/);
    const folder = fc.array(part, { minLength: 1, maxLength: 4 }).map((parts) => `/${parts.join('/')}`);
    const file = fc
      .array(fc.oneof(part, fc.constant('..')), { maxLength: 4 })
      .map((p) => [...p, 'clip.mp4'].join('/'));
    fc.assert(
      fc.property(folder, folder, file, (from, to, path) => {
        const there = moved(path, from, to);
        expect(join(to, there)).toBe(join(from, path));
      }),
    );
  });
});
