import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import { logPath } from '../dataFolder.ts';
import { needsNoSandbox } from './findBrowser.ts';

/** Runs the desktop app until it ends. Built files only: start.js and electron.js lie side by side. */
export async function startDesktop(electron: string, log: string | undefined): Promise<number> {
  const main = fileURLToPath(new URL('./electron.js', import.meta.url));
  const child = spawn(electron, [...(needsNoSandbox() ? ['--no-sandbox'] : []), main], {
    stdio: 'inherit',
    env: { ...process.env, TETHERFALL_LOG: logPath(log) },
  });
  // Ctrl-C reaches the app itself, for it shares the terminal; stay until it has closed what it has open.
  process.on('SIGINT', () => {});
  process.on('SIGTERM', () => child.kill());
  const [code] = await once(child, 'exit');
  return typeof code === 'number' ? code : 1;
}
