import { mkdirSync, symlinkSync, utimesSync, writeFileSync } from 'node:fs';
import { dirname, join, parse } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { ListedFolder } from '../../main/api/listFolder.ts';
import { appWith, errorOf, get, testFolder } from './fakeServices.ts';

const list = (homeFolder: string, folder?: string) =>
  get(
    appWith({ homeFolder }),
    `/api/files${folder === undefined ? '' : `?folder=${encodeURIComponent(folder)}`}`,
  );

describe('GET /api/files', () => {
  it('lists folders and files with their kind, in the order of their numbers', async () => {
    const home = testFolder();
    mkdirSync(join(home, 'rig'));
    for (const name of ['drop10.MP4', 'drop2.mp4', 'drop2.json', 'notes.txt', '.hidden'])
      writeFileSync(join(home, name), 'abc');
    utimesSync(join(home, 'drop2.mp4'), 0, new Date('2024-02-03T04:05:06Z'));
    const listed = (await (await list(home)).json()) as ListedFolder;
    expect(listed).toMatchObject({ folder: home, parent: dirname(home), home });
    expect(listed.folders).toEqual([{ name: 'rig', path: join(home, 'rig') }]);
    expect(listed.files.map((f) => [f.name, f.kind])).toEqual([
      ['drop2.json', 'sheet'],
      ['drop2.mp4', 'footage'],
      ['drop10.MP4', 'footage'],
      ['notes.txt', 'other'],
    ]);
    expect(listed.files[1]).toEqual({
      name: 'drop2.mp4',
      path: join(home, 'drop2.mp4'),
      kind: 'footage',
      sizeBytes: 3,
      modifiedAt: '2024-02-03T04:05:06.000Z',
    });
  });

  it('leaves out a link that leads nowhere', async () => {
    const home = testFolder();
    symlinkSync(join(home, 'gone.mp4'), join(home, 'link.mp4'));
    expect(await (await list(home)).json()).toMatchObject({ folders: [], files: [] });
  });

  it('has no parent at the top', async () => {
    const { root } = parse(process.cwd());
    expect(await (await list('/nowhere', root)).json()).toMatchObject({ folder: root, parent: null });
  });

  it('says what is wrong with a folder that cannot be listed', async () => {
    const home = testFolder();
    writeFileSync(join(home, 'a.txt'), '');
    const missing = join(home, 'missing');
    expect(await errorOf(await list(home, missing))).toEqual({
      status: 400,
      code: 'folderNotRead',
      message: `Folder ${missing} is not there; check the path.`,
    });
    expect((await errorOf(await list(home, join(home, 'a.txt')))).message).toMatch(/is not a folder/);
  });
});
