import { readFile, realpath } from 'node:fs/promises';
import { extname, join, sep } from 'node:path';
import type { Context } from 'hono';

const types: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.json': 'application/json',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
  '.ico': 'image/x-icon',
  '.woff2': 'font/woff2',
  '.wasm': 'application/wasm',
};

/** A file of the built window, and nothing outside its folder, whatever the address says. */
export function windowFiles(rendererFolder: string) {
  return async (c: Context): Promise<Response> => {
    const asked = new URL(c.req.url).pathname;
    const path = await fileIn(rendererFolder, asked === '/' ? '/index.html' : asked);
    if (path === null) return c.text(notThere(asked), 404);
    return c.body(await readFile(path), 200, {
      'content-type': types[extname(path)] ?? 'application/octet-stream',
      // Names of the built files carry a hash of their content, the page's does not.
      'cache-control': asked.startsWith('/assets/') ? 'private, max-age=31536000, immutable' : 'no-cache',
    });
  };
}

/** The file that an address means, or null: links are resolved first, so that none leads outside. */
async function fileIn(folder: string, asked: string): Promise<string | null> {
  try {
    const root = await realpath(folder);
    const path = await realpath(join(root, decodeURIComponent(asked)));
    return path.startsWith(root + sep) && extname(path) !== '' ? path : null;
  } catch {
    return null; // no such file, or no valid address: both are "not there"
  }
}

function notThere(asked: string): string {
  if (asked === '/') return 'The window has not been built; run: npm run build';
  return `There is nothing at ${asked}.`;
}
