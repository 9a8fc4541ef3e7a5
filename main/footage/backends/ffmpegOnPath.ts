import type { FootageBackend } from '../frameSource.ts';
import { programBackend } from '../programBackend.ts';

/** An ffmpeg program on the PATH. */
export const ffmpegOnPath: FootageBackend = programBackend('ffmpeg on PATH', async () => 'ffmpeg');
