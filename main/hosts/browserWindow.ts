import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout } from 'node:timers/promises';
import { needsNoSandbox } from './findBrowser.ts';

export interface OpenedBrowser {
  /** Settles, with what it ended by, when the browser has ended and its profile is gone. */
  readonly closed: Promise<string>;
  /** Ends the browser. */
  close(): Promise<void>;
}

/**
 * Opens an address as a window of its own, with a fresh profile: so the browser does not hand over to one that is running, and
 * its end is the window's end.
 */
export async function openInBrowser(browser: string, url: string): Promise<OpenedBrowser> {
  const profile = await mkdtemp(join(tmpdir(), 'tetherfall-window-'));
  const child = spawn(browser, browserArguments(url, profile), { stdio: 'ignore' });
  const closed = ended(child).then(async (end) => {
    await removeProfile(profile, child.exitCode !== 0 && !child.killed);
    return end;
  });
  return {
    closed,
    async close() {
      child.kill();
      await closed;
    },
  };
}

/** @param noSandbox  only where the browser cannot start otherwise */
export function browserArguments(url: string, profile: string, noSandbox = needsNoSandbox()): string[] {
  return [
    `--app=${url}`,
    `--user-data-dir=${profile}`,
    '--no-first-run',
    '--no-default-browser-check',
    '--disable-background-networking',
    '--disable-component-update',
    '--disable-sync',
    '--window-size=1440,900',
    ...(noSandbox ? ['--no-sandbox'] : []),
  ];
}

async function ended(child: ChildProcess): Promise<string> {
  try {
    const [code, signal] = await once(child, 'exit');
    return signal === null ? `exit code ${code}` : `signal ${signal}`;
  } catch (error) {
    return error instanceof Error ? error.message : String(error); // it could not be started
  }
}

/**
 * The browser's helpers may still be writing for a moment after it has ended; after a start that failed they even make the
 * folder again (seen up to 0.5 s later), so that is looked at until it stays away.
 */
async function removeProfile(profile: string, failed: boolean): Promise<void> {
  const remove = () => rm(profile, { recursive: true, force: true, maxRetries: 10, retryDelay: 100 });
  await remove();
  for (let looks = failed ? 4 : 0; looks > 0; looks--) {
    await setTimeout(400);
    await remove();
  }
}
