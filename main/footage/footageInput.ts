import { stat } from 'node:fs/promises';
import { basename, resolve } from 'node:path';
import type { Finding } from '../../analysis/sheet/result.ts';
import { Refusal } from '../refusal.ts';
import { stillsInFolder, stillsOfPattern, stillsStartingAt } from './stills.ts';

/** What is to be decoded: one file, or numbered stills in order. Paths are absolute. */
export type FootageInput =
  | { readonly kind: 'file'; readonly name: string; readonly path: string; readonly bytes: number }
  | {
      readonly kind: 'stills';
      readonly name: string;
      readonly files: readonly string[];
      readonly bytes: number;
      readonly findings: readonly Finding[];
    };

/**
 * Looks at what a path stands for: a video file, a pattern (`shot_%04d.png`), a folder of numbered stills, or the first
 * still of a sequence.
 *
 * @throws Refusal (status 3) where nothing is there, or nothing that could be footage
 */
export async function footageInput(path: string): Promise<FootageInput> {
  const absolute = resolve(path);
  const name = basename(absolute);
  const there = await stat(absolute).catch(() => null);
  if (there === null) {
    if (/%0?\d*d/.test(name)) return stills(name, await stillsOfPattern(absolute));
    throw new Refusal('footageNotFound', 3, `${path}: there is no such file; check the path of the footage`);
  }
  if (there.isDirectory()) return stills(name, await stillsInFolder(absolute));
  if (!there.isFile()) {
    throw new Refusal(
      'footageNotVideo',
      3,
      `${path}: is not a file; give a video file or a folder of stills`,
    );
  }
  if (there.size === 0) {
    throw new Refusal('footageEmpty', 3, `${path}: the file is empty; copy it from the camera again`);
  }
  if (/\.(?:png|tiff?)$/i.test(name)) return stills(name, await stillsStartingAt(absolute));
  return { kind: 'file', name, path: absolute, bytes: there.size };
}

async function stills(
  name: string,
  found: { files: readonly string[]; findings: readonly Finding[] },
): Promise<FootageInput> {
  let bytes = 0;
  for (const file of found.files) {
    const { size } = await stat(file);
    if (size === 0) {
      throw new Refusal('footageEmpty', 3, `${file}: the still is empty; copy it from the camera again`);
    }
    bytes += size;
  }
  return { kind: 'stills', name, bytes, ...found };
}
