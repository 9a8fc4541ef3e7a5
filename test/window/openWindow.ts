import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type BrowserContext, chromium, type Page } from 'playwright-core';
import { makeApp } from '../../main/api/app.ts';
import { findBrowser, needsNoSandbox } from '../../main/hosts/findBrowser.ts';
import { headlessShell } from '../../main/hosts/headlessShell.ts';
import { startLoopback } from '../../main/hosts/loopback.ts';
import { realServices } from '../../main/hosts/services.ts';

export interface OpenWindow {
  readonly page: Page;
  /** An empty folder of this window's own; its log and data are in it. */
  readonly folder: string;
  /** What the browser complained of so far: errors on its console and uncaught ones. */
  readonly complaints: readonly string[];
  close(): Promise<void>;
}

/** The built window in a real browser, served by the real loopback host, with a log and a data folder of its own. */
export async function openWindow(): Promise<OpenWindow> {
  const executablePath = findBrowser();
  if (executablePath === null) throw new Error('no browser: run the tests by npm test');
  const folder = mkdtempSync(join(tmpdir(), 'tetherfall-window-test-'));
  const services = realServices({ host: 'loopback', shell: headlessShell, log: join(folder, 'log.sqlite') });
  if (!existsSync(services.rendererFolder)) throw new Error('the window is not built: run npm run build');
  const app = makeApp({ ...services, dataFolder: folder, homeFolder: folder });
  const host = await startLoopback({ app });
  const context: BrowserContext = await chromium.launchPersistentContext(join(folder, 'profile'), {
    executablePath,
    headless: true,
    viewport: { width: 1280, height: 800 },
    chromiumSandbox: !needsNoSandbox(),
    args: [
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--no-first-run',
    ],
  });
  const page = context.pages()[0] ?? (await context.newPage());
  page.setDefaultTimeout(20_000);
  const complaints: string[] = [];
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(message.text());
  });
  page.on('pageerror', (error) => complaints.push(String(error)));
  await page.goto(host.launchUrl);
  return {
    page,
    folder,
    complaints,
    async close() {
      await context.close();
      await host.close();
      rmSync(folder, { recursive: true, force: true, maxRetries: 10, retryDelay: 100 });
    },
  };
}
