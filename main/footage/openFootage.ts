import { Refusal } from '../refusal.ts';
import { backends } from './backends/all.ts';
import { programSetByUser, userProgram } from './backends/userProgram.ts';
import type { FrameSource } from './frameSource.ts';

/**
 * Opens footage with the first usable backend: a program the user set (`ffmpegPath`, TETHERFALL_FFMPEG, FFMPEG_PATH), the
 * one that is installed with Tetherfall, one on the PATH, the bound library. A program that was set stands alone: nothing
 * replaces it unasked.
 *
 * @throws Refusal (status 3): no backend can be used, the set one does not work, or the footage cannot be read
 */
export async function openFootage(path: string, options: { ffmpegPath?: string } = {}): Promise<FrameSource> {
  const set = programSetByUser(options.ffmpegPath);
  if (set !== null) return await userProgram(set).open(path);
  for (const backend of backends) {
    if ((await backend.probe()) !== null) return await backend.open(path);
  }
  throw new Refusal(
    'noDecoder',
    3,
    'No video decoder was found: install ffmpeg 4.2 or newer, or set TETHERFALL_FFMPEG to its program, or run npm ci again to fetch ffmpeg-static or node-av',
  );
}
