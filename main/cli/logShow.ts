import { type Command, InvalidArgumentError } from 'commander';
import type { SavedReduction } from '../log/log.ts';
import { withExistingLog } from './existingLog.ts';
import { summary } from './summary.ts';

export function addLogShow(log: Command): void {
  log
    .command('show')
    .description('show one reduction')
    .argument('<number>', 'its number in the list', reductionNumber)
    .option('--log <file>', "the log's file (else TETHERFALL_LOG, else in the user's data folder)")
    .option('--json', 'as JSON, with its whole sheet and result')
    .action(logShow);
}

async function logShow(id: number, options: { log?: string; json?: true }): Promise<void> {
  const saved = await withExistingLog(options.log, (log) => log.get(id));
  const text = options.json ? JSON.stringify(saved, null, 2) : shown(saved).join('\n');
  process.stdout.write(`${text}\n`);
}

function shown(saved: SavedReduction): string[] {
  const { program, inputs } = saved.result;
  return [
    `Reduction ${saved.id}, saved ${saved.savedAt} by tetherfall ${program.version} (commit ${program.commit})`,
    '',
    ...summary(saved.sheet, saved.result),
    '',
    `Footage         ${saved.footagePath}`,
    `                SHA-256 ${inputs.footageSha256}`,
    `Sheet           SHA-256 ${inputs.sheetSha256}`,
    `Hash            ${saved.hash}`,
    `Previous hash   ${saved.previousHash}`,
  ];
}

function reductionNumber(text: string): number {
  if (!/^\d{1,15}$/.test(text)) throw new InvalidArgumentError('Give a number from the list.');
  return Number(text);
}
