import type { ChildProcess } from 'node:child_process';
import { subscribe } from 'node:diagnostics_channel';

const started: ChildProcess[] = [];
subscribe('child_process', (message) => {
  if (typeof message === 'object' && message !== null && 'process' in message) {
    started.push(message.process as ChildProcess);
  }
});

/** How many processes were started since this file was loaded; a test that sees none proves nothing. */
export function childrenStarted(): number {
  return started.length;
}

/** Of the processes started since this file was loaded, those that the system still has. */
export function childrenAlive(): number {
  return started.filter(({ pid }) => pid !== undefined && isAlive(pid)).length;
}

function isAlive(pid: number): boolean {
  try {
    return process.kill(pid, 0); // signal 0 only asks
  } catch {
    return false;
  }
}
