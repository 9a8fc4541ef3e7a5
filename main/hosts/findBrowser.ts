import { accessSync, constants, statSync } from 'node:fs';
import { posix, win32 } from 'node:path';

/** What looking for a browser needs to know of the machine. */
export interface Machine {
  readonly platform: NodeJS.Platform;
  readonly env: NodeJS.ProcessEnv;
  /** True where the path is a file that can be run. */
  readonly canRun: (path: string) => boolean;
}

const names = [
  'chromium',
  'chromium-browser',
  'google-chrome',
  'google-chrome-stable',
  'microsoft-edge',
  'microsoft-edge-stable',
  'brave-browser',
  'chrome',
  'msedge',
];

const macApplications = ['Google Chrome', 'Chromium', 'Microsoft Edge', 'Brave Browser'];

const windowsPrograms = [
  ['Google', 'Chrome', 'Application', 'chrome.exe'],
  ['Microsoft', 'Edge', 'Application', 'msedge.exe'],
  ['Chromium', 'Application', 'chrome.exe'],
  ['BraveSoftware', 'Brave-Browser', 'Application', 'brave.exe'],
];

/**
 * An installed browser of the Chromium family: the one that CHROME_PATH names, else by its usual names on PATH, else in the
 * usual places of the system. Null where there is none (also when CHROME_PATH names something that cannot be run: a browser
 * that was asked for is never replaced by another in silence).
 */
export function findBrowser(machine: Machine = thisMachine()): string | null {
  const { env, canRun } = machine;
  if (env.CHROME_PATH) return canRun(env.CHROME_PATH) ? env.CHROME_PATH : null;
  return [...onPath(machine), ...usualPlaces(machine)].find(canRun) ?? null;
}

/** Chromium's own sandbox cannot start as root on Linux. */
export function needsNoSandbox(platform = process.platform, userId = process.getuid?.()): boolean {
  return platform === 'linux' && userId === 0;
}

function onPath({ env, platform }: Machine): string[] {
  const { delimiter, join } = pathsOf(platform);
  const ending = platform === 'win32' ? '.exe' : '';
  const folders = (env.PATH ?? env.Path ?? '').split(delimiter).filter(Boolean);
  return names.flatMap((name) => folders.map((folder) => join(folder, name + ending)));
}

function usualPlaces({ env, platform }: Machine): string[] {
  const { join } = pathsOf(platform);
  if (platform === 'darwin') {
    const roots = ['/Applications', join(env.HOME ?? '', 'Applications')];
    return macApplications.flatMap((app) =>
      roots.map((root) => join(root, `${app}.app`, 'Contents', 'MacOS', app)),
    );
  }
  if (platform === 'win32') {
    const roots = [env.PROGRAMFILES, env['PROGRAMFILES(X86)'], env.LOCALAPPDATA].filter(
      (r) => r !== undefined,
    );
    return windowsPrograms.flatMap((parts) => roots.map((root) => join(root, ...parts)));
  }
  return ['/snap/bin/chromium', '/opt/google/chrome/chrome', '/usr/lib/chromium/chromium'];
}

function pathsOf(platform: NodeJS.Platform) {
  return platform === 'win32' ? win32 : posix;
}

function thisMachine(): Machine {
  return { platform: process.platform, env: process.env, canRun };
}

function canRun(path: string): boolean {
  try {
    accessSync(path, constants.X_OK);
    return statSync(path).isFile();
  } catch {
    return false;
  }
}
