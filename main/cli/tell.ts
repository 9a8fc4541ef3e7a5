import { CommanderError } from 'commander';
import { Refusal } from '../refusal.ts';
import { Interrupted } from './interruptible.ts';

/** What an error says and which exit status it gives. */
export interface Told {
  readonly code: string;
  readonly status: number;
  /** One line. */
  readonly message: string;
}

/** Tells an error on standard error in one line. @returns the exit status */
export function tell(error: unknown): number {
  // help and version were asked for: commander has printed them
  if (error instanceof CommanderError && error.exitCode === 0) return 0;
  const { status, message } = toldOf(error);
  process.stderr.write(`tetherfall: ${message}\n`);
  if (process.env.TETHERFALL_DEBUG === '1' && error instanceof Error)
    process.stderr.write(`${error.stack}\n`);
  return status;
}

export function toldOf(error: unknown): Told {
  if (error instanceof Refusal || error instanceof Interrupted) {
    return { code: error.code, status: error.status, message: oneLine(error.message) };
  }
  if (error instanceof CommanderError) {
    return { code: 'commandWrong', status: 2, message: usageMessage(error) };
  }
  const what = error instanceof Error ? error.message : String(error);
  return {
    code: 'unexpected',
    status: 1,
    message: `Unexpected error: ${firstLine(what)} (set TETHERFALL_DEBUG=1 to see where it came from, and report it)`,
  };
}

function usageMessage(error: CommanderError): string {
  if (error.code === 'commander.help') return 'no command given; see tetherfall --help.';
  const what = oneLine(error.message.replace(/^error: /, '').replace(/\.$/, ''));
  return `${what}; see tetherfall --help.`;
}

function oneLine(text: string): string {
  return text.trim().replace(/\s*\n\s*/g, ' ');
}

function firstLine(text: string): string {
  return text.trim().split('\n', 1)[0] ?? '';
}
