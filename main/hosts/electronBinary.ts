import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';

/**
 * Electron's program, where it has been fetched; else null. Only looked for, never fetched: loading the `electron` package would
 * download some hundred megabytes, and starting a tool must neither need the network nor wait for it. (`npx install-electron`
 * fetches it once.)
 */
export function electronBinary(
  packageFolder: string | null = electronPackage(),
  env: NodeJS.ProcessEnv = process.env,
): string | null {
  if (packageFolder === null) return null;
  const folder = env.ELECTRON_OVERRIDE_DIST_PATH ?? join(packageFolder, 'dist');
  try {
    // The file that the package's installer writes: the program's path for this system.
    const program = join(folder, readFileSync(join(packageFolder, 'path.txt'), 'utf8').trim());
    return existsSync(program) ? program : null;
  } catch {
    return null; // not fetched
  }
}

function electronPackage(): string | null {
  try {
    return dirname(createRequire(import.meta.url).resolve('electron/package.json'));
  } catch {
    return null; // a production install has no Electron
  }
}
