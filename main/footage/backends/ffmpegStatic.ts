import { z } from 'zod';
import type { FootageBackend } from '../frameSource.ts';
import { programBackend } from '../programBackend.ts';

const packageShape = z.object({ default: z.string() });

/** The ffmpeg program that is installed with Tetherfall: an optional package, absent where its download was not possible. */
export const ffmpegStatic: FootageBackend = programBackend('ffmpeg-static', async () => {
  const name = 'ffmpeg-static'; // not a literal: the build must leave the optional package outside
  const found = packageShape.safeParse(await import(name).catch(() => null));
  // inside an archive nothing can be started: the program lies unpacked beside it
  return found.success ? found.data.default.replace(/app\.asar(?!\.unpacked)/, 'app.asar.unpacked') : null;
});
