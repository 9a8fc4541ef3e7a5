import { accessSync, constants } from 'node:fs';
import { delimiter, join } from 'node:path';
import { backends } from '../../main/footage/backends/all.ts';
import { userProgram } from '../../main/footage/backends/userProgram.ts';
import type { FootageBackend } from '../../main/footage/frameSource.ts';

/** Where the ffmpeg on the PATH is, null where there is none. */
function ffmpegOnPathFile(): string | null {
  const name = process.platform === 'win32' ? 'ffmpeg.exe' : 'ffmpeg';
  for (const folder of (process.env.PATH ?? '').split(delimiter)) {
    const file = join(folder, name);
    try {
      accessSync(file, constants.X_OK);
      return file;
    } catch {
      // not in this folder
    }
  }
  return null;
}

/** A program set by the user, here the one on the PATH; none where there is none. */
export function setByUserHere(): FootageBackend[] {
  const program = ffmpegOnPathFile();
  return program === null ? [] : [userProgram(program)];
}

/** Every backend that works on this machine without a setting. */
export async function backendsHere(): Promise<FootageBackend[]> {
  const usable: FootageBackend[] = [];
  for (const backend of backends) if ((await backend.probe()) !== null) usable.push(backend);
  if (usable.length === 0) throw new Error('no backend works here: install ffmpeg or node-av');
  return usable;
}
