import { Refusal } from '../refusal.ts';
import { openDecoded } from './decodedFootage.ts';
import { ffmpegProgram } from './ffmpegProgram.ts';
import type { FootageBackend } from './frameSource.ts';
import { type ProgramFound, probeProgram } from './probeProgram.ts';

/**
 * A backend that runs an ffmpeg program. The backends of this kind differ only in how the program is found.
 *
 * @param locate  where the program is, null where there is none
 */
export function programBackend(name: string, locate: () => Promise<string | null>): FootageBackend {
  let program: ProgramFound | null = null;
  const found = async () => {
    const path = program === null ? await locate() : null;
    if (path !== null) program = await probeProgram(path);
    return program; // one that is missing is looked for again: it may have been installed meanwhile
  };
  return {
    name,
    async probe() {
      return (await found())?.version ?? null;
    },
    async open(path) {
      const usable = await found();
      if (usable !== null) return await openDecoded(path, ffmpegProgram(name, usable));
      const place = (await locate()) ?? 'not installed';
      throw new Refusal(
        'decoderUnusable',
        3,
        `${name} (${place}): is no ffmpeg program of version 4.2 or newer that runs here; correct the path or leave it unset`,
      );
    },
  };
}
