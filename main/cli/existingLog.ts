import { stat } from 'node:fs/promises';
import { logPath } from '../dataFolder.ts';
import type { Log } from '../log/log.ts';
import { openLog } from '../log/openLog.ts';
import { Refusal } from '../refusal.ts';
import { fromHere } from './fromHere.ts';

/**
 * Opens a log to look into it, and closes it again.
 *
 * @param asked  the log's file as typed
 * @throws Refusal (status 2) when there is none: looking must not make one
 */
export async function withExistingLog<T>(
  asked: string | undefined,
  look: (log: Log) => Promise<T>,
): Promise<T> {
  const path = fromHere(logPath(asked));
  if ((await stat(path).catch(() => null)) === null) {
    throw new Refusal(
      'logMissing',
      2,
      `There is no log ${path}; the first reduction makes it (or give another file with --log).`,
    );
  }
  const log = await openLog(path);
  try {
    return await look(log);
  } finally {
    await log.close();
  }
}
