import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { createInterface } from 'node:readline';
import { describe, expect, it, onTestFinished } from 'vitest';
import { fakeBrowser } from './fakeBrowser.ts';
import { httpRequest } from './httpRequest.ts';

const start = resolve(import.meta.dirname, '../../main/hosts/start.ts');

/** The start program itself, as `npm start` runs it, from source. */
function started(args: string[], env: NodeJS.ProcessEnv = {}) {
  const child = spawn(process.execPath, ['--import', 'tsx', start, ...args], {
    env: { ...process.env, ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  onTestFinished(() => {
    child.kill('SIGKILL');
  });
  return { child, exitCode: exitCode(child), output: createInterface(child.stdout), errors: child.stderr };
}

async function exitCode(child: ChildProcess): Promise<number | null> {
  const [code] = await once(child, 'exit');
  return code;
}

async function firstLine(lines: AsyncIterable<string>, pattern: RegExp): Promise<string> {
  for await (const line of lines) if (pattern.test(line)) return line;
  throw new Error(`no line like ${pattern}`);
}

describe('start', () => {
  it('prints an address that opens the window once, and ends cleanly on Ctrl-C', async () => {
    const { child, exitCode, output } = started(['--no-browser']);
    const url = (await firstLine(output, /http/)).replace(/^.*?(http\S+)$/, '$1');
    const launched = await httpRequest(url);
    expect(launched.status).toBe(303);
    const cookie = launched.headers['set-cookie']?.[0]?.split(';')[0];
    const answer = await httpRequest(new URL('/api/program', url).href, { cookie });
    expect(JSON.parse(answer.body)).toMatchObject({ name: 'tetherfall', host: 'loopback', dialogs: false });
    child.kill('SIGINT');
    expect(await exitCode).toBe(0);
    await expect(httpRequest(url)).rejects.toThrow();
  });

  it('opens the window in the browser that CHROME_PATH names, and ends with it', async () => {
    const { program, folder } = fakeBrowser(
      "const answer = await fetch(url, { redirect: 'manual' });",
      "writeFileSync(folder + '/seen', answer.status + ' ' + profile);",
    );
    // A port was asked for, so that it is the loopback host also where Electron has been fetched.
    const { exitCode } = started(['--port', '18437'], { CHROME_PATH: program });
    expect(await exitCode).toBe(0);
    const [status, profile] = readFileSync(join(folder, 'seen'), 'utf8').split(' ');
    expect(status).toBe('303');
    expect(existsSync(profile ?? '')).toBe(false);
  });

  it('prints the address when the browser fails', async () => {
    const { program } = fakeBrowser('process.exit(7);');
    const { child, exitCode, output } = started(['--port', '18438'], { CHROME_PATH: program });
    const lines: string[] = [];
    for await (const line of output) {
      lines.push(line);
      if (line.startsWith('Open this address')) break;
    }
    expect(lines.at(-2)).toContain('did not open the window (exit code 7)');
    child.kill('SIGTERM');
    expect(await exitCode).toBe(0);
  });

  it('refuses a wrong command in one line with status 2', async () => {
    const { exitCode, errors } = started(['--port', 'x']);
    const said: string[] = [];
    for await (const chunk of errors) said.push(String(chunk));
    expect(await exitCode).toBe(2);
    expect(said.join('')).toBe('tetherfall: --port x: give a number from 1 to 65535.\n');
  });
});
