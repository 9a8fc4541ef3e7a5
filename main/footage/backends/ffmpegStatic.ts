import { createRequire } from 'node:module';
import type { FootageBackend } from '../frameSource.ts';
import { programBackend } from '../programBackend.ts';

/** The ffmpeg program that is installed with Tetherfall: an optional package, absent where its download was not possible. */
export const ffmpegStatic: FootageBackend = programBackend('ffmpeg-static', async () => {
  const path = packagedPath();
  // inside an archive nothing can be started: the program lies unpacked beside it
  return path === null ? null : path.replace(/app\.asar(?!\.unpacked)/, 'app.asar.unpacked');
});

function packagedPath(): string | null {
  try {
    // not an import: the build would want to put the optional package into the bundle
    const path: unknown = createRequire(import.meta.url)('ffmpeg-static');
    return typeof path === 'string' ? path : null;
  } catch {
    return null; // not installed
  }
}
