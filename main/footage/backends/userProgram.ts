import type { FootageBackend } from '../frameSource.ts';
import { programBackend } from '../programBackend.ts';

/** The ffmpeg program that the user names. */
export function userProgram(path: string): FootageBackend {
  return programBackend('ffmpeg set by user', async () => path);
}

/** The program that was asked for, else the one that the environment names, else null. */
export function programSetByUser(
  asked: string | undefined,
  env: NodeJS.ProcessEnv = process.env,
): string | null {
  return asked || env.TETHERFALL_FFMPEG || env.FFMPEG_PATH || null;
}
