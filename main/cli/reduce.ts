import { basename } from 'node:path';
import type { Command } from 'commander';
import { fromHere } from './fromHere.ts';
import { interruptible } from './interruptible.ts';
import { type Reduction, reduction, warnIfNotLogged } from './reduction.ts';
import { noProgress, progressEvents, progressFor } from './showProgress.ts';
import { summary } from './summary.ts';
import { toldOf } from './tell.ts';

interface ReduceOptions {
  readonly out: string;
  /** false: --no-log */
  readonly log?: string | false;
  readonly quiet?: true;
  readonly json?: true;
}

export function addReduce(root: Command): void {
  root
    .command('reduce')
    .description('reduce the footage of a drop, as its sheet states, to a result')
    .argument('<sheet>', 'the sheet of the drop (JSON)')
    .requiredOption('--out <result>', 'where to write the result (JSON); an older result there is replaced')
    .option('--log <file>', "the log's file (else TETHERFALL_LOG, else in the user's data folder)")
    .option('--no-log', 'do not save the reduction in the log')
    .option('--quiet', 'show no progress')
    .option('--json', 'progress and end as one JSON object per line on standard output')
    .action(reduce);
}

async function reduce(sheetPath: string, options: ReduceOptions): Promise<void> {
  const emit = (event: object) => process.stdout.write(`${JSON.stringify(event)}\n`);
  const progress = options.quiet
    ? noProgress
    : options.json
      ? progressEvents(emit)
      : progressFor(process.stderr);
  try {
    const done = await interruptible((signal) =>
      reduction({
        sheetPath: fromHere(sheetPath),
        resultPath: fromHere(options.out),
        log: options.log === false ? null : options.log,
        progress,
        signal,
      }),
    );
    warnIfNotLogged(done);
    if (options.json) emit(doneEvent(done));
    else process.stdout.write(`${report(done).join('\n')}\n`);
  } catch (error) {
    if (options.json) emit({ event: 'error', ...toldOf(error) });
    throw error;
  }
}

function report(done: Reduction): string[] {
  const { result, footagePath, resultPath, logged } = done;
  const { frameCount, widthPx, heightPx } = result.inputs.footage;
  const lines = [`${basename(footagePath)}: ${frameCount} frames of ${widthPx} × ${heightPx} px`, ''];
  lines.push(...summary(done.sheet, result), '', `Result  ${resultPath}`);
  if (logged !== null && 'id' in logged) lines.push(`Log     reduction ${logged.id} in ${logged.path}`);
  return lines;
}

function doneEvent({ result, resultPath, logged }: Reduction): object {
  const { keyValues, verdicts, findings } = result;
  return { event: 'done', result: resultPath, log: logged, keyValues, verdicts, findings };
}
