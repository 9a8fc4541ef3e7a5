import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openInBrowser } from '../../main/hosts/browserWindow.ts';
import { fakeBrowser } from './fakeBrowser.ts';

const noteProfile = "writeFileSync(folder + '/profile', profile);";
const fillProfile = "mkdirSync(profile + '/Default'); writeFileSync(profile + '/Default/cookies', 'x');";

describe('openInBrowser', () => {
  it('settles when the browser ends, with its profile gone', async () => {
    const { program, folder } = fakeBrowser(noteProfile, fillProfile, "writeFileSync(folder + '/url', url);");
    const opened = await openInBrowser(program, 'http://127.0.0.1:1/launch');
    expect(await opened.closed).toBe('exit code 0');
    expect(readFileSync(join(folder, 'url'), 'utf8')).toBe('http://127.0.0.1:1/launch');
    expect(existsSync(readFileSync(join(folder, 'profile'), 'utf8'))).toBe(false);
  });

  it('ends the browser, with its profile gone', async () => {
    const { program, folder } = fakeBrowser(fillProfile, noteProfile, 'setInterval(() => {}, 1000);');
    const opened = await openInBrowser(program, 'http://127.0.0.1:1/');
    await expect.poll(() => existsSync(join(folder, 'profile'))).toBe(true);
    await opened.close();
    expect(await opened.closed).toBe('signal SIGTERM');
    expect(existsSync(readFileSync(join(folder, 'profile'), 'utf8'))).toBe(false);
  });

  it('removes a profile that a helper makes again after the browser has failed', async () => {
    const helper = 'setTimeout(() => fs.mkdirSync(process.argv[1]), 300)';
    const { program, folder } = fakeBrowser(
      noteProfile,
      "import { spawn } from 'node:child_process';",
      `spawn(process.execPath, ['-e', ${JSON.stringify(`const fs = require('node:fs'); ${helper}`)}, profile], { detached: true, stdio: 'ignore' }).unref();`,
      'process.exitCode = 21;',
    );
    const opened = await openInBrowser(program, 'http://127.0.0.1:1/');
    expect(await opened.closed).toBe('exit code 21');
    expect(existsSync(readFileSync(join(folder, 'profile'), 'utf8'))).toBe(false);
  });

  it('says so when the browser cannot be started', async () => {
    const opened = await openInBrowser(join(import.meta.dirname, 'no-such-browser'), 'http://127.0.0.1:1/');
    expect(await opened.closed).toMatch(/ENOENT/);
    await opened.close();
  });
});
