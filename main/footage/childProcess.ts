import { type ChildProcess, type SpawnOptions, spawn } from 'node:child_process';
import type { Readable, Writable } from 'node:stream';

/** A decoder's process: its pipes, and one promise of its end that never rejects. */
export interface Child {
  readonly stdin: Writable;
  readonly stdout: Readable;
  readonly stderr: Readable;
  /** How it ended; `failure` where it could not be started at all. */
  readonly ended: Promise<{ readonly status: number | null; readonly failure: Error | null }>;
  /** Ends it at once and waits until it is gone. */
  kill(): Promise<void>;
}

/** Starts a program without a shell. An abort of the signal kills it. */
export function startChild(
  program: string,
  args: readonly string[],
  signal: AbortSignal,
  options: SpawnOptions = {},
): Child {
  const child = spawn(program, args, { ...options, stdio: ['pipe', 'pipe', 'pipe'], windowsHide: true });
  const ended = endOf(child);
  const kill = async () => {
    child.kill('SIGKILL');
    child.stdout?.destroy();
    await ended;
  };
  const onAbort = () => void kill();
  if (signal.aborted) onAbort();
  else signal.addEventListener('abort', onAbort, { once: true });
  void ended.then(() => signal.removeEventListener('abort', onAbort));
  child.stdin?.on('error', () => {
    // a program that ended early closes its input; how it ended is what counts
  });
  const { stdin, stdout, stderr } = child;
  if (stdin === null || stdout === null || stderr === null)
    throw new Error(`${program}: started without pipes`);
  return { stdin, stdout, stderr, ended, kill };
}

function endOf(child: ChildProcess): Child['ended'] {
  return new Promise((resolve) => {
    child.once('error', (failure) => resolve({ status: null, failure }));
    child.once('close', (status) => resolve({ status, failure: null }));
  });
}
