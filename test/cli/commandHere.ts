import { vi } from 'vitest';
import { commandLine } from '../../main/cli/commandLine.ts';
import type { CommandRun } from './commandRun.ts';

/**
 * Runs a command in this process: the same way from arguments to exit status and output as commandRun, without the second
 * that a process of its own takes to start. One at a time.
 */
export async function tetherfallHere(args: readonly string[]): Promise<CommandRun> {
  const written = { stdout: '', stderr: '' };
  const spies = (['stdout', 'stderr'] as const).map((stream) =>
    vi.spyOn(process[stream], 'write').mockImplementation((text) => {
      written[stream] += String(text);
      return true;
    }),
  );
  try {
    const status = await commandLine(args);
    return { status, ...written };
  } finally {
    for (const spy of spies) spy.mockRestore();
  }
}
