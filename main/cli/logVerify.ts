import type { Command } from 'commander';
import { Refusal } from '../refusal.ts';
import { withExistingLog } from './existingLog.ts';

export function addLogVerify(log: Command): void {
  log
    .command('verify')
    .description('recompute the chain of hashes: shows whether the log was changed outside the program')
    .option('--log <file>', "the log's file (else TETHERFALL_LOG, else in the user's data folder)")
    .addHelpText(
      'after',
      '\nSomeone who rewrites the end of the log with all its hashes can only be caught by a hash that was noted elsewhere:\n' +
        'note the last hash from time to time, outside this computer.\nExit status: 0 the log is whole, 1 it was changed.',
    )
    .action(logVerify);
}

async function logVerify(options: { log?: string }): Promise<void> {
  await withExistingLog(options.log, async (log) => {
    const fault = await log.verify();
    if (fault) {
      throw new Refusal(
        'logChanged',
        1,
        `Log ${log.path}: reduction ${fault.id} ${fault.reason}; keep a copy of the file and find out who changed it.`,
      );
    }
    const [last] = await log.list();
    const whole = last
      ? `nothing was changed since it was saved (${last.id} ${last.id === 1 ? 'reduction' : 'reductions'}).\nLast hash ${last.hash}`
      : 'it is empty.';
    process.stdout.write(`Log ${log.path}: ${whole}\n`);
  });
}
