import { chmodSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';

/** A program that stands in for a browser: it is started with the same arguments and runs the given lines of JavaScript. */
export function fakeBrowser(...lines: string[]): { program: string; folder: string } {
  const folder = mkdtempSync(join(tmpdir(), 'tetherfall-fake-browser-'));
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }));
  const program = join(folder, 'browser.mjs');
  const given = [
    "const given = (name) => process.argv.find((a) => a.startsWith(name + '='))?.slice(name.length + 1);",
    "const [url, profile] = [given('--app'), given('--user-data-dir')];",
    `const folder = ${JSON.stringify(folder)};`,
    "import { appendFileSync, existsSync, mkdirSync, writeFileSync } from 'node:fs';",
  ];
  writeFileSync(program, [`#!${process.execPath}`, ...given, ...lines].join('\n'));
  chmodSync(program, 0o755);
  return { program, folder };
}
