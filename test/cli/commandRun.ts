import { type ChildProcess, spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const program = fileURLToPath(new URL('../../main/cli/tetherfall.ts', import.meta.url));
const loader = import.meta.resolve('tsx');

export interface CommandRun {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

interface RunOptions {
  readonly cwd?: string;
  readonly env?: NodeJS.ProcessEnv;
  /** Called once, when something has come on standard output or standard error. */
  readonly onFirstOutput?: (child: ChildProcess) => void;
}

/** Runs the command line in a process of its own, as a user would, and waits for its end. */
export function tetherfall(args: readonly string[], options: RunOptions = {}): Promise<CommandRun> {
  const child = spawn(process.execPath, ['--import', loader, program, ...args], {
    cwd: options.cwd,
    env: { ...cleanEnvironment(), ...options.env },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let stdout = '';
  let stderr = '';
  child.stdout.setEncoding('utf8').on('data', (text: string) => {
    if (stdout + stderr === '') options.onFirstOutput?.(child);
    stdout += text;
  });
  child.stderr.setEncoding('utf8').on('data', (text: string) => {
    if (stdout + stderr === '') options.onFirstOutput?.(child);
    stderr += text;
  });
  return new Promise((resolve, reject) => {
    child.on('error', reject);
    child.on('close', (status) => resolve({ status, stdout, stderr }));
  });
}

/** Without what `npm test` and a developer's shell say about themselves. */
function cleanEnvironment(): NodeJS.ProcessEnv {
  const own = /^(npm_|INIT_CWD$|TETHERFALL_|NODE_OPTIONS$|VITEST)/;
  return Object.fromEntries(Object.entries(process.env).filter(([name]) => !own.test(name)));
}
