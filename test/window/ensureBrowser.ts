import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { findBrowser, needsNoSandbox } from '../../main/hosts/findBrowser.ts';

// Run before the tests: the window's tests need a real browser of the Chromium family.

if (findBrowser() === null && canInstall()) install();
const browser = findBrowser();
if (browser === null) {
  console.error(`tetherfall: ${howToGetOne()}`);
  process.exitCode = 1;
} else console.log(`The window's tests use ${browser}.`);

/** Only where it is plain how, and nobody has to be asked: Debian, as root, and no other browser was named. */
function canInstall(): boolean {
  return !process.env.CHROME_PATH && needsNoSandbox() && existsSync('/etc/debian_version');
}

function install(): void {
  console.log('No browser of the Chromium family here; installing Debian\u2019s chromium.');
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  for (const order of [['update'], ['install', '-y', '--no-install-recommends', 'chromium']]) {
    const ended = spawnSync('apt-get', order, { stdio: 'inherit', env });
    if (ended.status !== 0) return;
  }
}

function howToGetOne(): string {
  if (process.env.CHROME_PATH)
    return `CHROME_PATH (${process.env.CHROME_PATH}) is not a program that can be run; name a browser of the Chromium family or unset it.`;
  const how =
    process.platform === 'linux'
      ? 'install one (Debian or Ubuntu: sudo apt-get install chromium)'
      : 'install Chromium, Chrome, Edge or Brave';
  return `the tests need a browser of the Chromium family and none was found; ${how}, or set CHROME_PATH to one.`;
}
