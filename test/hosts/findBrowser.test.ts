import { describe, expect, it } from 'vitest';
import { browserArguments } from '../../main/hosts/browserWindow.ts';
import { findBrowser, needsNoSandbox } from '../../main/hosts/findBrowser.ts';

function machine(platform: NodeJS.Platform, env: NodeJS.ProcessEnv, ...programs: string[]) {
  return { platform, env, canRun: (path: string) => programs.includes(path) };
}

describe('findBrowser', () => {
  it('takes the one that CHROME_PATH names, and no other in its place', () => {
    const env = { CHROME_PATH: '/opt/mine', PATH: '/usr/bin' };
    expect(findBrowser(machine('linux', env, '/opt/mine', '/usr/bin/chromium'))).toBe('/opt/mine');
    expect(findBrowser(machine('linux', env, '/usr/bin/chromium'))).toBeNull();
  });

  it('looks on PATH first, by name', () => {
    const env = { PATH: '/usr/local/bin::/usr/bin' };
    expect(findBrowser(machine('linux', env, '/usr/bin/google-chrome'))).toBe('/usr/bin/google-chrome');
    expect(findBrowser(machine('linux', env, '/usr/bin/google-chrome', '/usr/bin/chromium'))).toBe(
      '/usr/bin/chromium',
    );
    expect(findBrowser(machine('win32', { PATH: 'C:\\a;D:\\b' }, 'D:\\b\\msedge.exe'))).toBe(
      'D:\\b\\msedge.exe',
    );
  });

  it.each<[NodeJS.Platform, NodeJS.ProcessEnv, string]>([
    ['linux', {}, '/snap/bin/chromium'],
    ['darwin', { HOME: '/Users/a' }, '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome'],
    ['darwin', { HOME: '/Users/a' }, '/Users/a/Applications/Chromium.app/Contents/MacOS/Chromium'],
    [
      'win32',
      { PROGRAMFILES: 'C:\\Program Files' },
      'C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe',
    ],
    [
      'win32',
      { 'PROGRAMFILES(X86)': 'C:\\Program Files (x86)' },
      'C:\\Program Files (x86)\\Microsoft\\Edge\\Application\\msedge.exe',
    ],
  ])('looks in the usual places of %s', (platform, env, program) => {
    expect(findBrowser(machine(platform, env, program))).toBe(program);
  });

  it('finds none where there is none', () => {
    for (const platform of ['linux', 'darwin', 'win32'] as const)
      expect(findBrowser(machine(platform, { PATH: '/usr/bin' }))).toBeNull();
  });
});

describe('browserArguments', () => {
  it('gives the browser’s sandbox up only where it cannot start: as root on Linux', () => {
    expect([needsNoSandbox('linux', 0), needsNoSandbox('linux', 1000)]).toEqual([true, false]);
    expect([needsNoSandbox('darwin', 0), needsNoSandbox('win32', undefined)]).toEqual([false, false]);
    expect(browserArguments('http://x/', '/p', true)).toContain('--no-sandbox');
    expect(browserArguments('http://x/', '/p', false)).not.toContain('--no-sandbox');
  });

  it('opens a window of its own with a profile of its own', () => {
    const args = browserArguments('http://127.0.0.1:1/launch?t=x', '/tmp/p', false);
    expect(args).toContain('--app=http://127.0.0.1:1/launch?t=x');
    expect(args).toContain('--user-data-dir=/tmp/p');
  });
});
