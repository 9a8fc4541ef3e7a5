import { open, readFile, stat, truncate, writeFile } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { resultSchema } from '../../analysis/sheet/result.ts';
import { tetherfallHere } from './commandHere.ts';
import { tetherfall } from './commandRun.ts';
import { smallDropFolder, smallDropSheet } from './smallDrop.ts';

const folder = smallDropFolder();
const sheet = smallDropSheet();
const [body] = sheet.bodies;
const [bar] = sheet.scale.bars ?? [];

/** Reduces a sheet that cannot be reduced: one line, the right status, and nothing new in the folder. */
async function refused(sheetPath: string, out = folder.path('result.json'), run = tetherfallHere) {
  const before = await folder.files();
  const { status, stdout, stderr } = await run([
    'reduce',
    sheetPath,
    '--out',
    out,
    '--log',
    folder.path('log.sqlite'),
    '--quiet',
  ]);
  expect(stderr).toMatch(/^tetherfall: [^\n]+\n$/);
  expect(stdout).toBe('');
  expect(await folder.files()).toEqual(before);
  return { status, line: stderr };
}

describe('bad input gets one clear line and leaves nothing behind', () => {
  it('no such sheet', async () => {
    expect(await refused(folder.path('none.json'))).toEqual({
      status: 2,
      line: expect.stringContaining('none.json: there is no such file; check the path'),
    });
  });

  it('a sheet that is not JSON', async () => {
    const path = await folder.sheet('text.json', 'capture rate 1000\nlength 0.7');
    expect(await refused(path)).toEqual({ status: 2, line: expect.stringContaining('text.json: not JSON') });
  });

  it.each<[string, Record<string, unknown>, RegExp]>([
    [
      'a wrong unit',
      { scale: { bars: [{ ...bar, lengthM: undefined, lengthMm: 140 }] } },
      /lengthMm.*lengthM/,
    ],
    [
      'a negative length',
      { scale: { bars: [{ ...bar, lengthM: -0.7 }] } },
      /scale\.bars\[0\]\.lengthM: must be greater than 0 \(it is -0\.7\)/,
    ],
    [
      'capture rate 0',
      { clock: { kind: 'captureRate', captureRateHz: 0 } },
      /clock\.captureRateHz: must be greater than 0 \(it is 0\)/,
    ],
    [
      'marks outside the picture',
      { scale: { bars: [{ ...bar, b: { x: 10, y: 400 } }] }, bodies: [{ ...body, x: 140 }] },
      /Outside the picture \(100 × 180 px\): bodies: "ball" at x 140, y 35; scale\.bars\[0\]\.b at x 10, y 400/,
    ],
    [
      'a body on featureless background',
      { bodies: [{ ...body, x: 50, y: 140 }] },
      /"ball" at x 50, y 140 in frame 0: the patch shows nothing but an even background; place it on the body/,
    ],
  ])('%s', async (name, changes, line) => {
    const path = await folder.sheet(`${name.replaceAll(' ', '-')}.json`, changes);
    expect(await refused(path)).toEqual({ status: 2, line: expect.stringMatching(line) });
  });

  it('no such footage', async () => {
    const path = await folder.sheet('no-footage.json', { footage: { path: 'gone.mp4' } });
    expect(await refused(path)).toEqual({
      status: 3,
      line: expect.stringContaining('gone.mp4: there is no such file'),
    });
  });

  it('footage that is not a video', async () => {
    await writeFile(folder.path('notes.mp4'), 'Drop 7: rig 2, 21 °C\n'.repeat(200));
    const path = await folder.sheet('not-video.json', { footage: { path: 'notes.mp4' } });
    expect(await refused(path, folder.path('result.json'), tetherfall)).toEqual({
      status: 3,
      line: expect.stringContaining('notes.mp4'),
    });
  });

  it('an empty video', async () => {
    await (await open(folder.path('empty.mp4'), 'w')).close();
    const path = await folder.sheet('empty.json', { footage: { path: 'empty.mp4' } });
    expect(await refused(path)).toEqual({
      status: 3,
      line: expect.stringContaining('empty.mp4: the file is empty'),
    });
  });

  it('a video cut off before its index, of which nothing can be read', async () => {
    const whole = await readFile(folder.path('drop.mp4'));
    await writeFile(folder.path('cut.mp4'), whole.subarray(0, whole.length / 2));
    const path = await folder.sheet('cut-mp4.json', { footage: { path: 'cut.mp4' } });
    expect(await refused(path)).toEqual({ status: 3, line: expect.stringContaining('cut.mp4') });
  });

  it('a body that is not there to be followed', async () => {
    // the ball never comes back to where it started, and the frames hold nothing before it falls
    const path = await folder.sheet('rest-only.json', { footage: { path: 'drop.avi', lastFrame: 15 } });
    expect(await refused(path)).toEqual({
      status: 4,
      line: expect.stringContaining('No key value can be given'),
    });
  });

  it('a folder for the result that is missing', async () => {
    const path = await folder.sheet('good.json', {});
    expect(await refused(path, folder.path('missing/result.json'))).toEqual({
      status: 2,
      line: expect.stringMatching(/there is no folder .*missing; make it/),
    });
  });

  it.each([
    ['the sheet itself', 'good.json'],
    ['the footage', 'drop.avi'],
  ])('a result that would replace %s', async (_, name) => {
    const path = await folder.sheet('good.json', {});
    const before = await readFile(folder.path(name));
    expect(await refused(path, folder.path(name))).toEqual({
      status: 2,
      line: expect.stringContaining('a file that is not a result; it is left alone'),
    });
    expect(before.equals(await readFile(folder.path(name)))).toBe(true);
  });
});

describe('a video cut off in the middle, of which frames can be read', () => {
  it('gives a result from the frames that can be trusted, and says how many', async () => {
    await writeFile(folder.path('cut.avi'), await readFile(folder.path('drop.avi')));
    const { size } = await stat(folder.path('cut.avi'));
    await truncate(folder.path('cut.avi'), Math.floor(size * 0.8));
    const path = await folder.sheet('cut-avi.json', { footage: { path: 'cut.avi' } });
    const out = folder.path('cut-result.json');
    const run = await tetherfallHere(['reduce', path, '--out', out, '--no-log', '--quiet']);
    expect(run).toMatchObject({ status: 0, stderr: '' });
    const result = resultSchema.parse(JSON.parse(await readFile(out, 'utf8')));
    const finding = result.findings.find((f) => f.code === 'footageDamaged');
    expect(finding?.text).toMatch(/\b12[5-8]\b/); // 80 % of 160 frames, less the file's head and the frame that was cut
    expect(result.inputs.footage.frameCount).toBeLessThan(129);
    expect(result.inputs.footage.frameCount).toBeGreaterThan(124);
  });
});
