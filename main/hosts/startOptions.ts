import { parseArgs } from 'node:util';
import { Refusal } from '../refusal.ts';

export interface StartOptions {
  /** A port was asked for: the loopback host is wanted, whatever else there is. */
  readonly port: number | undefined;
  readonly browser: boolean;
  readonly log: string | undefined;
  readonly help: boolean;
}

export const startUsage = `Opens the Tetherfall window.

  --port N       serve the window on 127.0.0.1:N (for an SSH tunnel that keeps the port) instead of the desktop app
  --no-browser   only print the address that opens the window
  --log FILE     the log's file (else TETHERFALL_LOG, else in the user's data folder)
`;

/** @throws Refusal (status 2) with one line that says what is wrong */
export function startOptions(args: readonly string[]): StartOptions {
  const { port, ...values } = parsed(args);
  return {
    port: port === undefined ? undefined : portNumber(port),
    browser: !values['no-browser'],
    log: values.log,
    help: values.help,
  };
}

function parsed(args: readonly string[]) {
  try {
    return parseArgs({
      args: [...args],
      options: {
        port: { type: 'string' },
        'no-browser': { type: 'boolean', default: false },
        log: { type: 'string' },
        help: { type: 'boolean', short: 'h', default: false },
      },
    }).values;
  } catch (error) {
    const what = error instanceof Error ? error.message : String(error);
    throw new Refusal('commandWrong', 2, `${what.split('\n')[0]} See --help.`, { cause: error });
  }
}

function portNumber(text: string): number {
  const port = Number(text);
  if (!/^\d+$/.test(text) || port < 1 || port > 65535)
    throw new Refusal('commandWrong', 2, `--port ${text}: give a number from 1 to 65535.`);
  return port;
}
