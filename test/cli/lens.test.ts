import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import { PNG_GREY, png } from '../footage/png.ts';
import { lightOf, photo, type Scene } from '../scale/madeTargets.ts';
import { seenBy, squareRig } from '../scale/pinhole.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';
import { tetherfallHere } from './commandHere.ts';

const [widthPx, heightPx] = [160, 140];
const rig = {
  ...squareRig,
  pxPerM: 200,
  centre: { x: 79.5, y: 69.5 },
  radiusPx: 106.3,
  k1: 0.02,
  pitchDeg: 8,
};
const dots = Array.from({ length: 20 }, (_, i) =>
  seenBy(rig, ((i % 5) - 2) * 0.13, (Math.floor(i / 5) - 1.5) * 0.13),
);
const scene: Scene = (x, y, side) => {
  const near = dots.find((d) => Math.abs(x - d.x) < 8 && Math.abs(y - d.y) < 8);
  const inside = near ? 6 - Math.hypot(x - near.x, y - near.y) : -1;
  return 210 - 170 * Math.min(1, Math.max(0, 0.5 + inside / side));
};

let folder = '';
let target = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'tetherfall-lens-'));
  target = join(folder, 'target.png');
  const { luma } = photo(lightOf(scene, widthPx, heightPx, 0.7), widthPx, heightPx, 1, 1);
  const rows = Array.from({ length: heightPx }, (_, y) =>
    Uint8Array.from(luma.subarray(y * widthPx, (y + 1) * widthPx)),
  );
  await writeFile(target, png(widthPx, 8, PNG_GREY, rows));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

describe('tetherfall lens', () => {
  it('prints the lens of a dot target as the sheet states it', async () => {
    const { status, stdout, stderr } = await tetherfallHere(['lens', target, '--dots', '5x4']);
    expect({ status, stderr }).toEqual({
      status: 0,
      stderr: expect.stringMatching(
        /^20 points in 1 pictures, 0\.0\d+ px off along each axis; state the lens as camera\.lens/,
      ),
    });
    const sheet = sheetSchema.parse({ ...exampleSheet(), camera: { lens: JSON.parse(stdout) } });
    const lens = sheet.camera?.lens;
    if (lens?.uK1 === undefined || lens.uK2 === undefined || lens.rK1K2 === undefined)
      throw new Error('no uncertainty');
    const u = Math.sqrt(lens.uK1 ** 2 + lens.uK2 ** 2 + 2 * lens.rK1K2 * lens.uK1 * lens.uK2);
    // the shift at the corner, within three of its standard uncertainties
    expect(Math.abs(lens.k1 + lens.k2 - rig.k1)).toBeLessThan(3 * u);
  });

  it('writes it to a new file, and never over one', async () => {
    const out = join(folder, 'lens.json');
    expect(await tetherfallHere(['lens', target, '--dots', '5x4', '--out', out])).toMatchObject({
      status: 0,
      stdout: '',
    });
    expect(JSON.parse(await readFile(out, 'utf8'))).toHaveProperty('uK1');
    const again = await tetherfallHere(['lens', target, '--dots', '5x4', '--out', out]);
    expect(again).toMatchObject({
      status: 2,
      stderr: expect.stringMatching(/--out .*lens\.json: it could not be written .*give a new file\.\n$/),
    });
  });

  it.each([
    [
      'a target that is not stated',
      () => ['lens', target],
      /State the target by one of --dots 9x6 and --squares 8x5/,
    ],
    [
      'counts that are none',
      () => ['lens', target, '--dots', 'many'],
      /give columns and rows, 3 or more, as 9x6/,
    ],
    [
      'a target that is not seen',
      () => ['lens', target, '--squares', '9x6'],
      /only \d+ of 54 inner corners are seen clearly; check the counts/,
    ],
    [
      'another count of dots',
      () => ['lens', target, '--dots', '4x4'],
      /5 × 4 dots are seen, more than the 4 × 4 that are stated/,
    ],
  ])('refuses %s in one line, with status 2', async (_, args, line) => {
    const { status, stdout, stderr } = await tetherfallHere(args());
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toMatch(line);
    expect(stderr.trimEnd().split('\n')).toHaveLength(1);
  });

  it('refuses a picture that is not there, with status 3', async () => {
    const { status, stderr } = await tetherfallHere(['lens', join(folder, 'none.png'), '--dots', '5x4']);
    expect(status).toBe(3);
    expect(stderr).toContain('none.png');
  });
});
