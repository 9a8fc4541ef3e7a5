import { mkdtemp, readdir, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll } from 'vitest';
import type { SheetInput } from '../../analysis/sheet/sheet.ts';
import { encode } from '../../fixtures/encode.ts';
import { makeMovingBody } from '../../fixtures/movingBody.ts';

export const gMps2 = 9.81;
const pxPerM = 1000;

/** A ball that rests for 25 frames and then falls freely: small, so that a reduction takes a second. */
export function smallDropSheet(): SheetInput {
  return {
    schema: 'tetherfall/sheet/1',
    footage: { path: 'drop.avi' },
    clock: { kind: 'captureRate', captureRateHz: 1000, uCaptureRateRel: 1e-5 },
    camera: { exposureS: 0 },
    scale: {
      bars: [
        { a: { x: 10, y: 20 }, b: { x: 10, y: 160 }, lengthM: 140 / pxPerM, uLengthM: 1e-5, uMarkPx: 0.02 },
      ],
      plumb: { a: { x: 90, y: 10 }, b: { x: 90, y: 170 } },
      planeOffsetM: 0,
      uPlaneOffsetM: 0,
      cameraDistanceM: 3,
    },
    site: { gMps2, uGMps2: 1e-4 },
    bodies: [{ id: 'ball', role: 'reference', frame: 0, x: 50, y: 35, patchPx: 31 }],
  };
}

/**
 * A folder with the small drop's footage `drop.avi` (uncompressed) and `drop.mp4` (H.264), shared by the tests of one file and
 * removed after them.
 */
export function smallDropFolder(): {
  readonly path: (name: string) => string;
  /** Writes a sheet: the drop's own with changes, or any text. */
  readonly sheet: (name: string, changes: Record<string, unknown> | string) => Promise<string>;
  /** All files, to see what was left behind. */
  readonly files: () => Promise<string[]>;
} {
  let folder = '';
  const path = (name: string) => join(folder, name);
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'tetherfall-cli-'));
    const { frames } = makeMovingBody({
      look: 'ball',
      sizePx: 22,
      widthPx: 100,
      heightPx: 180,
      frameCount: 160,
      noiseSigma: 1.5,
      path: (timeS) => ({ x: 50.3, y: 35.2 + 0.5 * gMps2 * pxPerM * Math.max(0, timeS - 0.025) ** 2 }),
    });
    await encode(frames, path('drop.avi'), { kind: 'rawGrey' }, { playRateHz: 30 });
    await encode(frames, path('drop.mp4'), { kind: 'h264', crf: 10 }, { playRateHz: 30 });
  });
  afterAll(() => rm(folder, { recursive: true, force: true, maxRetries: 10 }));
  return {
    path,
    async sheet(name, changes) {
      const text =
        typeof changes === 'string' ? changes : JSON.stringify({ ...smallDropSheet(), ...changes });
      await writeFile(path(name), text);
      return path(name);
    },
    files: async () => (await readdir(folder, { recursive: true })).sort(),
  };
}
