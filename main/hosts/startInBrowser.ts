import { makeApp } from '../api/app.ts';
import { openInBrowser } from './browserWindow.ts';
import { findBrowser } from './findBrowser.ts';
import { headlessShell } from './headlessShell.ts';
import { type Loopback, startLoopback } from './loopback.ts';
import { realServices } from './services.ts';
import type { StartOptions } from './startOptions.ts';

/** Serves the window on the loopback host until the browser's window is closed or Ctrl-C is pressed. */
export async function startInBrowser(options: StartOptions): Promise<number> {
  const app = makeApp(realServices({ host: 'loopback', shell: headlessShell, log: options.log }));
  const host = await startLoopback({ app, port: options.port ?? 0 });
  const stopped = stopSignal();
  try {
    const browser = options.browser ? findBrowser() : null;
    if (options.browser && browser === null) console.log(noBrowserFound());
    if (browser === null || !(await windowIn(browser, host, stopped))) await addressUntil(host, stopped);
    return 0;
  } finally {
    await host.close();
  }
}

/** @returns false when the browser ended without having opened the window */
async function windowIn(browser: string, host: Loopback, stopped: Promise<void>): Promise<boolean> {
  console.log(`Tetherfall opens in a window of its own, served at ${host.url}. Ctrl-C ends it.`);
  const opened = await openInBrowser(browser, host.launchUrl);
  const end = await Promise.race([opened.closed, stopped]);
  await opened.close();
  if (end === undefined || host.launched()) return true;
  console.log(`The browser ${browser} did not open the window (${end}).`);
  return false;
}

/** Shows an address that works once, and another each time Enter is pressed, for a window that was closed. */
async function addressUntil(host: Loopback, stopped: Promise<void>): Promise<void> {
  const { stdin } = process;
  console.log(`Open this address (it works once): ${host.newLaunchUrl()}`);
  if (stdin.isTTY) {
    console.log('Enter shows a new one; Ctrl-C ends the program.');
    stdin.on('data', () => console.log(host.newLaunchUrl()));
  }
  await stopped;
  stdin.pause();
}

function stopSignal(): Promise<void> {
  return new Promise((resolve) => {
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.once(signal, () => resolve());
  });
}

function noBrowserFound(): string {
  return process.env.CHROME_PATH
    ? `CHROME_PATH (${process.env.CHROME_PATH}) is not a program that can be run.`
    : 'No browser of the Chromium family was found; set CHROME_PATH to one, or use any browser on this machine.';
}
