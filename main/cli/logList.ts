import { basename } from 'node:path';
import type { Command } from 'commander';
import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import type { ReductionSummary } from '../log/log.ts';
import { withExistingLog } from './existingLog.ts';
import { table } from './table.ts';

export function addLogList(log: Command): void {
  log
    .command('list')
    .description('list the reductions, the newest first')
    .option('--log <file>', "the log's file (else TETHERFALL_LOG, else in the user's data folder)")
    .option('--json', 'as JSON')
    .action(logList);
}

async function logList(options: { log?: string; json?: true }): Promise<void> {
  const { path, rows } = await withExistingLog(options.log, async (log) => ({
    path: log.path,
    rows: await log.list(),
  }));
  if (options.json) process.stdout.write(`${JSON.stringify(rows, null, 2)}\n`);
  else if (rows.length === 0) process.stdout.write(`The log ${path} is empty.\n`);
  else process.stdout.write(`${[...table([heading, ...rows.map(cells)]), '', `Log ${path}`].join('\n')}\n`);
}

const heading = ['No.', 'Saved (UTC)', 'Verdict', 'ball.g', 'Footage'];

function cells({ id, savedAt, outcome, ballG, footagePath, stops }: ReductionSummary): string[] {
  return [
    String(id),
    savedAt.replace('T', ' ').slice(0, 16),
    stops > 0 ? `${outcome}, ${stops} stop` : outcome,
    ballG ? formatMeasured(ballG.value, ballG.u, 'm/s2') : '',
    basename(footagePath),
  ];
}
