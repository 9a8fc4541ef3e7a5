import { resolve } from 'node:path';
import type { Result } from '../../analysis/sheet/result.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import { logPath } from '../dataFolder.ts';
import { readSheet } from '../jobs/readSheet.ts';
import { reduceInWorker } from '../jobs/reduceInWorker.ts';
import type { NewReduction } from '../log/log.ts';
import { openLog } from '../log/openLog.ts';
import { fromHere } from './fromHere.ts';
import { refuseUnwritable, writeResult } from './resultFile.ts';
import type { ProgressShow } from './showProgress.ts';
import { toldOf } from './tell.ts';

interface ReductionOrder {
  readonly sheetPath: string;
  readonly resultPath: string;
  /** The log's file as typed, undefined for the usual one, null for none. */
  readonly log: string | undefined | null;
  readonly progress: ProgressShow;
  readonly signal: AbortSignal;
}

/** Where the reduction is in the log; why it is not; or null when it was not to be saved. */
type Logged = { readonly id: number; readonly path: string } | { readonly problem: string } | null;

export interface Reduction {
  readonly sheet: Sheet;
  readonly result: Result;
  readonly resultPath: string;
  readonly footagePath: string;
  readonly logged: Logged;
}

/**
 * From a sheet file to a result file and an entry in the log. The result counts: when it was written and the log then fails,
 * that is told in `logged` and the reduction stands.
 *
 * @throws Refusal (2 sheet or command, 3 footage, 4 a body was lost); when stopped, whatever the job ended with
 */
export async function reduction(order: ReductionOrder): Promise<Reduction> {
  const { sheetPath, resultPath, progress, signal } = order;
  const file = await readSheet(sheetPath);
  await refuseUnwritable(resultPath);
  let result: Result;
  try {
    result = await reduceInWorker(file, { signal, onProgress: progress.show });
  } finally {
    progress.end();
  }
  signal.throwIfAborted();
  await writeResult(resultPath, result);
  const footagePath = resolve(file.folder, file.sheet.footage.path);
  const logged =
    order.log === null
      ? null
      : await saved(fromHere(logPath(order.log)), { sheet: file.sheet, result, footagePath });
  return { sheet: file.sheet, result, resultPath, footagePath, logged };
}

async function saved(path: string, reduction: NewReduction): Promise<Logged> {
  try {
    const log = await openLog(path);
    try {
      const { id } = await log.save(reduction);
      return { id, path };
    } finally {
      await log.close();
    }
  } catch (error) {
    return { problem: toldOf(error).message };
  }
}

/** The line for a reduction that should be in the log and is not. */
export function warnIfNotLogged({ logged, resultPath }: Reduction): void {
  if (logged === null || !('problem' in logged)) return;
  process.stderr.write(
    `tetherfall: The reduction is NOT in the log. ${logged.problem} The result is in ${resultPath}.\n`,
  );
}
